/** Where in a text a fault was found; line and column start at 1. */
export interface Place {
  /** Name of the text, as given to who read it. */
  readonly file: string;
  /** From 1. */
  readonly line: number;
  /** From 1, in UTF-16 units. */
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
  /** `wrong` in pieces, where it tells lengths: whoever knows the unit of the input can tell them in that, see `sayIn`. */
  readonly pieces?: readonly Piece[];
  /** What would do: 'give the size along the shaft, for example 10 mm'. */
  readonly remedy: string;
}

/** Words, or a length or a place among them, metres. */
export type Piece =
  | string
  | {
      /** The length, or x and y of the place. */
      readonly metres: number | readonly [x: number, y: number];
    };

/** A unit of length: `{ name: 'mm', metres: 1e-3 }`. */
export interface LengthUnit {
  /** What follows the figure. */
  readonly name: string;
  /** How long it is. */
  readonly metres: number;
}

/** The pieces as one text, lengths to nine digits: `near (35, 20) mm`. */
export function sayIn({ name, metres }: LengthUnit, pieces: readonly Piece[]): string {
  const figure = (length: number): number => Number((length / metres).toPrecision(9));
  return pieces
    .map((piece) => {
      if (typeof piece === 'string') return piece;
      const length = piece.metres;
      return typeof length === 'number' ? `${figure(length)} ${name}` : `(${length.map(figure).join(', ')}) ${name}`;
    })
    .join('');
}

/** What is wrong, told in words alone or with lengths among them, as parts of a `Fault`. */
export function tellWrong(wrong: string | readonly Piece[]): Pick<Fault, 'wrong' | 'pieces'> {
  return typeof wrong === 'string' ? { wrong } : { wrong: sayIn({ name: 'm', metres: 1 }, wrong), pieces: wrong };
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
  /** `InputError`, also where `instanceof` fails between two copies of the library. */
  override readonly name = 'InputError';
  /** In the order found; never empty. */
  readonly faults: readonly Fault[];
  /** The message is a line for each fault, as `formatFault` tells it. */
  constructor(faults: readonly Fault[]) {
    super(faults.map(formatFault).join('\n'));
    this.faults = faults;
  }
}

/**
 * Makes several checks and tells what all of them find.
 * @throws InputError with the faults of each that throws one
 */
export function checkAll(...checks: readonly (() => void)[]): void {
  const faults = checks.flatMap((check): readonly Fault[] => {
    try {
      check();
      return [];
    } catch (error) {
      if (error instanceof InputError) return error.faults;
      throw error;
    }
  });
  if (faults.length > 0) throw new InputError(faults);
}
