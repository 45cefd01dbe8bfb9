import type { Fault } from '@gapwright/fem-core';
import { type Document, formatPath, type Path, placeOf, placeOfKey } from '@gapwright/fem-core/text';
import type { Warning } from '../machine.js';
import type { Problem } from './problem.js';

/** Gathers what the checks find. */
export interface Report {
  /** Something that stops the work. */
  fault(path: Path, code: string, wrong: string, remedy: string): void;
  /** A fault of another file that the key at `path` names. */
  faultBeside(path: Path, fault: Fault): void;
  /** Something to know that does not. */
  warn(path: Path, text: string): void;
}

/** Beyond this number the rest is counted only. */
const MOST_FAULTS = 200;

/** A report, and what it has gathered. */
export interface OpenReport extends Report {
  add(problem: Problem): void;
  /** In the order of the text. */
  faults(): readonly Fault[];
  warnings(): readonly Warning[];
}

/** A report on one document; what is wrong with its writing is in it from the start. */
export function openReport(document: Document): OpenReport {
  const faults: Fault[] = [...document.faults];
  const warnings: Warning[] = [];
  const add = ({ code, path, wrong, remedy }: Problem): void => {
    const at = code === 'unknown-key' ? placeOfKey(document, path) : placeOf(document, path);
    faults.push({ code, at, key: formatPath(path), wrong, remedy });
  };
  return {
    add,
    fault: (path, code, wrong, remedy) => add({ path, code, wrong, remedy }),
    faultBeside: (path, fault) =>
      faults.push({ ...fault, at: fault.at ?? placeOf(document, path), key: formatPath(path) }),
    warn: (path, text) => warnings.push({ key: formatPath(path), text }),
    faults: () => inOrder(faults),
    warnings: () => warnings,
  };
}

/** In the order of the text; the rest of a flood is only counted. */
function inOrder(faults: readonly Fault[]): readonly Fault[] {
  const sorted = [...faults].sort(
    (a, b) => (a.at?.line ?? 0) - (b.at?.line ?? 0) || (a.at?.column ?? 0) - (b.at?.column ?? 0),
  );
  if (sorted.length <= MOST_FAULTS) return sorted;
  const wrong = `and ${sorted.length - MOST_FAULTS} faults more`;
  return [
    ...sorted.slice(0, MOST_FAULTS),
    { code: 'many-faults', key: '', wrong, remedy: 'mend the ones above first' },
  ];
}
