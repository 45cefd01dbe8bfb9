import { InputError } from '@gapwright/fem-core';
import {
  formatOf,
  type Machine,
  type ReadOptions,
  SECTION_FORMAT,
  type SectionProblem,
  type Warning,
} from '@gapwright/machine-models';
import type { Engine } from '../engine.js';
import { given, givenMm } from '../figures.js';
import { readInputFile } from '../input.js';
import type { CommonOptions } from '../options.js';
import { type Locate, warningText } from '../outputs.js';
import { plainText } from '../plain-text.js';
import { resultJson } from '../results-json.js';
import type { SectionEngine } from '../section-engine.js';
import { exitStatus, type Surroundings } from '../surroundings.js';
import { ownVersion } from '../version.js';

/** `gapwright check FILE`: reads and judges a machine file or a section file without solving it. */
export function runCheck(
  engine: Engine,
  sections: SectionEngine,
  file: string,
  options: CommonOptions,
  { stdout, stderr }: Surroundings,
): number {
  const { read, sha256 } = readInputFile(file, options.set, (text, given) => judge(engine, sections, text, given));
  const { kind, name, summary, warnings, locate } = read;
  if (!options.quiet)
    for (const warning of warnings) stderr.write(`warning: ${plainText(warningText(warning, locate))}\n`);
  if (options.json) {
    stdout.write(
      resultJson({
        format: 'gapwright-check/1',
        gapwright: ownVersion(),
        [kind]: name,
        input_sha256: sha256,
        warnings,
      }),
    );
    return exitStatus.done;
  }
  const remarks = warnings.length === 1 ? '1 warning' : `${warnings.length} warnings`;
  stdout.write(`${plainText(file)}: sound, ${remarks}: ${plainText(name)}, ${summary}\n`);
  return exitStatus.done;
}

/** A sound file in a few words. */
interface Judged {
  readonly kind: 'machine' | 'section';
  readonly name: string;
  readonly summary: string;
  readonly warnings: readonly Warning[];
  readonly locate?: Locate;
}

function judge(engine: Engine, sections: SectionEngine, text: string, options: ReadOptions): Judged {
  if (formatOf(text, options.settings) !== SECTION_FORMAT) {
    const { machine, warnings } = engine.read(text, options);
    return { kind: 'machine', name: machine.name, summary: machineSummary(machine), warnings };
  }
  const { problem, warnings, place, locate } = sections.read(text, options);
  try {
    const doubts = [...warnings, ...sections.check(problem)];
    return { kind: 'section', name: problem.name, summary: sectionSummary(problem), warnings: doubts, locate };
  } catch (error) {
    throw error instanceof InputError ? place(error) : error;
  }
}

function machineSummary({ rotor, winding, operation, model }: Machine): string {
  const radii = model.slices.map(({ radius }) => givenMm(radius)).join(', ');
  return (
    `${rotor.poles} poles, ${winding.coils} coils, gap ${givenMm(rotor.gap)} mm, ${given(operation.speedRpm)} rpm, ` +
    `slices at ${radii} mm`
  );
}

function sectionSummary({ section, probes, depth }: SectionProblem): string {
  const counted = (count: number, what: string): string => `${count} ${what}${count === 1 ? '' : 's'}`;
  const space = section.open === true ? ', in unbounded space' : '';
  return `${counted(section.regions.length, 'region')}${space}, ${counted(probes.length, 'probe')}, depth ${givenMm(depth)} mm`;
}
