import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import { regionAreas } from '../elements/areas.js';
import { forceFault } from '../field/air-layer.js';
import type { Field } from '../field/field.js';
import { checkForm } from '../geometry/check-form.js';
import type { Section } from '../geometry/section.js';
import { BEYOND_REGION, OUTSIDE_REGION } from '../geometry/unbounded.js';
import type { Probe } from './probe.js';

/**
 * Checks what the types do not: plain JavaScript may hand over anything, and names may be mistyped.
 * @throws InputError for what is no section; else with everything wrong, `probes.NAME` or `accuracy` as the key
 */
export function checkProbes(section: Section, probes: readonly Probe[], accuracy: number): void {
  checkForm(section);
  const regions = [section.background, ...section.regions.map(({ name }) => name), OUTSIDE_REGION, BEYOND_REGION];
  const faults: Fault[] = [];
  if (!(accuracy > 0 && accuracy < Infinity)) {
    const wrong = `must be a number above 0, got ${String(accuracy)}`;
    faults.push({ code: 'out-of-range', key: 'accuracy', wrong, remedy: 'give a share, for example 0.002' });
  }
  for (const [i, probe] of probes.entries()) {
    if (typeof probe !== 'object' || probe === null) {
      const wrong = `must be an object, got ${String(probe)}`;
      faults.push({ code: 'bad-form', key: `probes.${i}`, wrong, remedy: 'give its kind, its name and where' });
      continue;
    }
    const key = `probes.${probe.name}`;
    for (const name of namesOf(probe)) {
      if (regions.includes(name)) continue;
      const wrong = `${String(name)} covers no area: it is no region`;
      faults.push({ code: 'no-region', key, wrong, remedy: `regions here are: ${regions.slice(0, -2).join(', ')}` });
    }
    const wrong = wrongNumber(probe);
    if (wrong !== undefined)
      faults.push({ code: 'out-of-range', key, wrong, remedy: 'give a number that makes sense' });
  }
  if (faults.length > 0) throw new InputError(faults);
}

/**
 * Checks what only a mesh shows, any mesh of the section: solved or not.
 * @throws InputError with everything wrong: regions that later ones cover, forces on bodies without air all round them
 */
export function checkProbesOn(filled: Pick<Field, 'mesh' | 'setup'>, probes: readonly Probe[]): void {
  const { regionNames } = filled.mesh;
  const areas = regionAreas(filled.mesh);
  const faults = probes.flatMap((probe): readonly Fault[] => {
    if (probe.kind === 'force') return [forceFault(filled, probe.on) ?? []].flat();
    const names = namesOf(probe);
    const asksForRegions = probe.kind === 'linkage' || probe.kind === 'mean';
    if (!asksForRegions || names.some((name) => areas[regionNames.indexOf(name)] > 0)) return [];
    const wrong = `${names.join(', ')} covers no area`;
    return [
      { code: 'no-region', key: `probes.${probe.name}`, wrong, remedy: `regions here are: ${regionNames.join(', ')}` },
    ];
  });
  if (faults.length > 0) throw new InputError(faults);
}

function namesOf(probe: Probe): readonly string[] {
  switch (probe.kind) {
    case 'force':
      return listed(probe.on);
    case 'mean':
      return listed(probe.over);
    case 'linkage':
      return [probe.of];
    default:
      return [];
  }
}

/** A text handed over in place of a list would be searched letter by letter. */
const listed = (names: readonly string[]): readonly string[] => (Array.isArray(names) ? names : [String(names)]);

/** Of one line; each is an answer with its errors. */
const MOST_POINTS = 1_000_000;

function wrongNumber(probe: Probe): string | undefined {
  switch (probe.kind) {
    case 'line':
      if (Number.isInteger(probe.points) && probe.points >= 1 && probe.points <= MOST_POINTS)
        return pointless(probe.from) ?? pointless(probe.to);
      return `points must be a whole number from 1 to ${MOST_POINTS}, got ${String(probe.points)}`;
    case 'linkage':
      return Number.isFinite(probe.turns) ? undefined : `turns must be a finite number, got ${String(probe.turns)}`;
    case 'point':
      return pointless(probe.at);
    case 'flux':
      return pointless(probe.from) ?? pointless(probe.to);
    case 'force':
      return Array.isArray(probe.on) ? pointless(probe.about ?? [0, 0]) : 'on must be a list of names';
    case 'mean':
      return Array.isArray(probe.over) ? undefined : 'over must be a list of names';
    default:
      return `is of an unknown kind, ${String((probe satisfies never as Probe).kind)}`;
  }
}

const pointless = (at: readonly number[]): string | undefined =>
  Array.isArray(at) && at.length === 2 && at.every(Number.isFinite) ? undefined : 'a place must be two finite numbers';
