/** Where text goes; a stream of Node, or a list in a test. */
export interface Output {
  write(text: string): unknown;
  readonly isTTY?: boolean | undefined;
  /** Characters a line of the terminal holds. */
  readonly columns?: number | undefined;
}

/** All that the commands know of the process they run in. */
export interface Surroundings {
  readonly stdout: Output;
  readonly stderr: Output;
  readonly env: Readonly<Record<string, string | undefined>>;
  /** Aborted when the user interrupts; checked between slices and between files. */
  readonly signal: AbortSignal;
}

/** The user interrupted; everything half done has been undone on the way up. */
export class Interrupted extends Error {
  override readonly name = 'Interrupted';
}

/** @throws Interrupted once the user has interrupted */
export function stopIfInterrupted(signal: AbortSignal): void {
  if (signal.aborted) throw new Interrupted('interrupted');
}

/** Exit statuses of the contract. */
export const exitStatus = { done: 0, ownFault: 1, inputFault: 2, notReached: 3, interrupted: 130 } as const;
