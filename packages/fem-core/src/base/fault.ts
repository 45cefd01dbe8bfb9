/** Where in a text a fault was found; line and column start at 1. */
export interface Place {
  readonly file: string;
  readonly line: number;
  readonly column: number;
}

/** One thing wrong with the input, told so that its author can mend it. */
export interface Fault {
  /** For programs: 'unknown-key', 'out-of-range', 'outline-crosses-itself', ... */
  readonly code: string;
  /** Undefined when the input came from code. */
  readonly at?: Place | undefined;
  /** Dotted path of the culprit, for example 'rotor.magnets.thickness'. */
  readonly key: string;
  /** What is wrong, with the numbers: 'must be more than 0 mm, got -10 mm'. */
  readonly wrong: string;
  /** What would do: 'give the size along the shaft, for example 10 mm'. */
  readonly remedy: string;
}

/** `FILE:LINE:COLUMN: key: what is wrong; what would do`, leaving out what is not known. */
export function formatFault(fault: Fault): string {
  const place = fault.at === undefined ? '' : `${fault.at.file}:${fault.at.line}:${fault.at.column}: `;
  const key = fault.key === '' ? '' : `${fault.key}: `;
  const remedy = fault.remedy === '' ? '' : `; ${fault.remedy}`;
  return `${place}${key}${fault.wrong}${remedy}`;
}

/** Thrown once per input, with everything found wrong in it. */
export class InputError extends Error {
  override readonly name = 'InputError';
  readonly faults: readonly Fault[];
  constructor(faults: readonly Fault[]) {
    super(faults.map(formatFault).join('\n'));
    this.faults = faults;
  }
}
