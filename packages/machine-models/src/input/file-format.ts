import { InputError } from '@gapwright/fem-core';
import { applySettings, plainValue, readDocument, type Setting } from '@gapwright/fem-core/text';
import type { OpenReport } from './report.js';

export const MACHINE_FORMAT = 'gapwright-machine/1';
export const SECTION_FORMAT = 'gapwright-section/1';

/** What a file says it is; undefined where it says nothing or cannot be read, which its reader will tell. */
export function formatOf(text: string, settings: readonly Setting[] = []): string | undefined {
  try {
    return formatIn(plainValue(applySettings(readDocument(text, ''), settings).root));
  } catch (error) {
    if (error instanceof InputError) return undefined;
    throw error;
  }
}

/**
 * Stops at once where the file is of another kind: every key of it would be a fault.
 * @throws InputError
 */
export function refuseOtherFormat(
  raw: unknown,
  other: string,
  [wrong, remedy]: readonly [wrong: string, remedy: string],
  report: OpenReport,
): void {
  const [kind] = other.split('/');
  if (formatIn(raw)?.split('/')[0] !== kind) return; // of any version
  report.fault(['format'], 'other-format', wrong, remedy);
  throw new InputError(report.faults());
}

function formatIn(raw: unknown): string | undefined {
  const format = typeof raw === 'object' && raw !== null && 'format' in raw ? raw.format : undefined;
  return typeof format === 'string' ? format : undefined;
}
