import type { Point, Probe, Shape } from '@gapwright/fem-core';
import { findNearest, type Path, showText } from '@gapwright/fem-core/text';
import type { Report } from '../input/report.js';
import { liesOutside } from './outline-side.js';
import { type ProbeFile, type RegionFile, SECTION_BOUNDS } from './schema.js';

const KINDS = ['point', 'line', 'force_on', 'linkage_of', 'flux_through', 'mean_over'] as const;

/** What the probes are judged against. */
export interface ProbeSurroundings {
  readonly regions: readonly RegionFile[];
  /** The name under which the background is known to the solver. */
  readonly background: string;
  /** What points must lie in; undefined in unbounded space. */
  readonly outline: Shape | undefined;
}

/** Names without a region for which a similar one is looked for. */
const MOST_SEARCHED = 50;

/** The probes as the solver takes them; those with something wrong are told and left out. */
export function buildProbes(entries: readonly ProbeFile[], around: ProbeSurroundings, report: Report): Probe[] {
  const turns = new Map(around.regions.map((region) => [region.name, region.turns ?? 1]));
  const firsts = new Map<string, number>();
  let searched = 0;
  let linePoints = 0;

  const isKnown = (name: string, path: Path, background: boolean): boolean => {
    if (name === '') return false; // told already
    if (turns.has(name) || (background && name === around.background)) return true;
    const names = [...turns.keys()].slice(0, 1000);
    const nearest = searched++ < MOST_SEARCHED ? findNearest(name, names) : undefined;
    const some = names
      .slice(0, 5)
      .map((known) => showText(known))
      .join(', ');
    const remedy =
      nearest === undefined
        ? `regions here are: ${some}${names.length > 5 ? ', ...' : ''}`
        : `did you mean ${showText(nearest)}?`;
    report.fault(
      path,
      'unknown-region',
      `${showText(name)} is no region`,
      names.length === 0 ? 'draw one under regions' : remedy,
    );
    return false;
  };
  const areKnown = (given: string | readonly string[], path: Path, background: boolean): readonly string[] => {
    const names = typeof given === 'string' ? [given] : given;
    const places = names.map((_, k): Path => (typeof given === 'string' ? path : [...path, k]));
    return [...new Set(names.filter((name, k) => isKnown(name, places[k], background)))];
  };
  const isInside = (place: Point, path: Path): void => {
    if (around.outline === undefined || !liesOutside(around.outline, place)) return;
    report.fault(path, 'outside-outline', 'lies outside the outline', 'move it inside, or enlarge the outline');
  };

  return entries.flatMap((entry, i): Probe[] => {
    const path = ['probes', i];
    const { name } = entry;
    const first = firsts.get(name);
    if (name !== '' && first !== undefined) {
      const wrong = `${showText(name)} is the name of probes.${first} too`;
      report.fault([...path, 'name'], 'name-twice', wrong, 'give each probe a name of its own');
    }
    firsts.set(name, i);
    const kinds = KINDS.filter((kind) => entry[kind] !== undefined);
    if (kinds.length !== 1) {
      const wrong = kinds.length === 0 ? 'asks for nothing' : `asks for ${kinds.join(' and ')} at once`;
      report.fault(path, 'one-of', wrong, `give exactly one of ${KINDS.join(', ')}`);
      return [];
    }
    if (entry.about !== undefined && entry.force_on === undefined) {
      report.fault(
        [...path, 'about'],
        'stray-key',
        `means nothing beside ${kinds[0]}`,
        'leave it out; it goes with force_on',
      );
    }
    if (entry.point !== undefined) {
      isInside(entry.point, [...path, 'point']);
      return [{ kind: 'point', name, at: entry.point }];
    }
    if (entry.line !== undefined) {
      const { from, to, points } = entry.line;
      linePoints += points;
      if (linePoints > SECTION_BOUNDS.linePoints) {
        const wrong = `all lines down to this one have ${linePoints} points together, more than ${SECTION_BOUNDS.linePoints}`;
        report.fault([...path, 'line', 'points'], 'too-many-points', wrong, 'give fewer');
      }
      refuseLength0(from, to, [...path, 'line'], report);
      const out =
        around.outline !== undefined && [from, to].some((end) => around.outline && liesOutside(around.outline, end));
      if (out)
        report.warn(
          [...path, 'line'],
          'reaches beyond the outline; there is no field there, and its figures are left empty',
        );
      return [{ kind: 'line', name, from, to, points }];
    }
    if (entry.force_on !== undefined) {
      const on = areKnown(entry.force_on, [...path, 'force_on'], false);
      return [{ kind: 'force', name, on, ...(entry.about === undefined ? {} : { about: entry.about }) }];
    }
    if (entry.linkage_of !== undefined) {
      isKnown(entry.linkage_of, [...path, 'linkage_of'], false);
      return [{ kind: 'linkage', name, of: entry.linkage_of, turns: turns.get(entry.linkage_of) ?? Number.NaN }];
    }
    if (entry.flux_through !== undefined) {
      const { from, to } = entry.flux_through;
      isInside(from, [...path, 'flux_through', 'from']);
      isInside(to, [...path, 'flux_through', 'to']);
      return [{ kind: 'flux', name, from, to }];
    }
    const over = areKnown(entry.mean_over ?? [], [...path, 'mean_over'], true);
    return [{ kind: 'mean', name, over }];
  });
}

function refuseLength0(from: Point, to: Point, path: Path, report: Report): void {
  if (from[0] !== to[0] || from[1] !== to[1]) return;
  report.fault(path, 'no-length', 'has no length: both ends are the same point', 'give two points, or a point probe');
}
