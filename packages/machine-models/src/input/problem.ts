import type { Path } from '@gapwright/fem-core/text';

/** One thing wrong with a value, before anyone knows where in a file it stands. */
export interface Problem {
  readonly code: string;
  readonly path: Path;
  readonly wrong: string;
  readonly remedy: string;
}

export function problem(code: string, wrong: string, remedy: string, path: Path = []): Problem {
  return { code, path, wrong, remedy };
}
