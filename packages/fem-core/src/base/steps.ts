/**
 * A long computation as a generator: it stops after each step to tell how far it is, and ends with its result. Whoever drives
 * it may pause between steps, show progress, or leave off; several may be driven in turn.
 */
export type Steps<Progress, Result> = Generator<Progress, Result, void>;

/**
 * Drives a computation to its end at once.
 * @param onStep  told after each step
 */
export function finish<Progress, Result>(
  steps: Steps<Progress, Result>,
  onStep?: (progress: Progress) => void,
): Result {
  for (;;) {
    const next = steps.next();
    if (next.done === true) return next.value;
    onStep?.(next.value);
  }
}

/** What tells that a result is no longer wanted; an `AbortSignal` is one. */
export interface Cancel {
  /** True once the result is no longer wanted. */
  readonly aborted: boolean;
  /** What `drive` throws then; an Error of its own where it is absent. */
  readonly reason?: unknown;
}

/** How a computation is driven. */
export interface DriveOptions<Progress> {
  /** Resolves when the computation may go on; in Node and browsers `() => new Promise((go) => setTimeout(go))` lets events in. */
  readonly pause: () => Promise<void>;
  /** Looked at before each step. */
  readonly signal?: Cancel;
  /** Told after each step. */
  readonly onStep?: (progress: Progress) => void;
}

/**
 * Drives a computation to its end, pausing between steps.
 * @throws the signal's reason once it is aborted; the computation is left where it is
 */
export async function drive<Progress, Result>(
  steps: Steps<Progress, Result>,
  { pause, signal, onStep }: DriveOptions<Progress>,
): Promise<Result> {
  for (;;) {
    if (signal?.aborted === true) {
      steps.return(undefined as Result); // runs what the computation wants to tidy; its value is not used
      throw signal.reason ?? new Error('aborted');
    }
    const next = steps.next();
    if (next.done === true) return next.value;
    onStep?.(next.value);
    await pause();
  }
}
