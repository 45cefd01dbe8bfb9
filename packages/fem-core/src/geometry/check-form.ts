import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';

/** Faults told of one input at most. */
const MOST = 50;

/**
 * Checks that what was handed over as a `Section` has the form of one: plain JavaScript may hand over anything.
 * @throws InputError with every fault of form, 50 at most
 */
export function checkForm(section: unknown): void {
  const faults: Fault[] = [];
  const tell: Tell = (code, key, wrong, remedy) => {
    if (faults.length < MOST) faults.push({ code, key, wrong, remedy });
  };
  if (isGroup(section)) checkSection(section, tell);
  else tell('bad-form', 'section', `must be an object, got ${shown(section)}`, 'give outline, background and regions');
  if (faults.length > 0) throw new InputError(faults);
}

type Tell = (code: string, key: string, wrong: string, remedy: string) => void;
type Group = Readonly<Record<string, unknown>>;

const isGroup = (value: unknown): value is Group =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

const shown = (value: unknown): string => {
  if (value === undefined || value === null) return 'nothing';
  if (typeof value === 'number') return String(value);
  if (Array.isArray(value)) return 'a list';
  return typeof value === 'object' ? 'an object' : `a ${typeof value}`;
};

function checkSection(section: Group, tell: Tell): void {
  checkShape(section.outline, 'outline', tell);
  if (typeof section.background !== 'string' || section.background === '') {
    tell('bad-form', 'background', `must be a name, got ${shown(section.background)}`, "for example 'air'");
  }
  checkEdgeLength(section.maxEdge, 'maxEdge', tell);
  if (Array.isArray(section.regions)) {
    section.regions.forEach((region, i) => {
      checkRegion(region, i, tell);
    });
  } else tell('bad-form', 'regions', `must be a list, got ${shown(section.regions)}`, 'give [] for none');
  checkMatched(section.matched, tell);
  checkSizes(section.sizeAt, tell);
  if (section.open !== undefined && typeof section.open !== 'boolean') {
    tell('bad-form', 'open', `must be true or false, got ${shown(section.open)}`, 'leave it out for a closed section');
  }
}

function checkRegion(region: unknown, i: number, tell: Tell): void {
  if (!isGroup(region)) {
    tell('bad-form', `regions.${i}`, `must be an object, got ${shown(region)}`, 'give a name and a shape');
    return;
  }
  const named = typeof region.name === 'string' && region.name !== '';
  const key = `regions.${named ? region.name : i}`;
  if (!named) tell('bad-form', `${key}.name`, `must be a text, got ${shown(region.name)}`, 'name the region');
  checkShape(region.shape, `${key}.shape`, tell);
  checkEdgeLength(region.maxEdge, `${key}.maxEdge`, tell);
}

function checkEdgeLength(maxEdge: unknown, key: string, tell: Tell): void {
  if (maxEdge === undefined || (typeof maxEdge === 'number' && maxEdge > 0)) return;
  tell('bad-edge-length', key, `must be more than 0 m, got ${shown(maxEdge)}`, 'leave it out for no limit');
}

function checkShape(shape: unknown, key: string, tell: Tell): void {
  if (!isGroup(shape)) {
    tell('bad-form', key, `must be a shape, got ${shown(shape)}`, KINDS);
  } else if (shape.kind === 'rectangle') {
    checkPoint(shape.from, `${key}.from`, tell);
    checkPoint(shape.to, `${key}.to`, tell);
  } else if (shape.kind === 'circle') {
    checkPoint(shape.centre, `${key}.centre`, tell);
    checkNumber(shape.radius, `${key}.radius`, tell);
  } else if (shape.kind !== 'polygon') {
    tell('bad-form', `${key}.kind`, 'is no kind of shape', KINDS);
  } else if (Array.isArray(shape.corners)) {
    for (let i = 0; i < shape.corners.length; i++) checkPoint(shape.corners[i], `${key}.corners.${i}`, tell);
  } else {
    tell('bad-form', `${key}.corners`, `must be a list of points, got ${shown(shape.corners)}`, 'give three or more');
  }
}

const KINDS =
  "a shape is { kind: 'rectangle', from, to }, { kind: 'polygon', corners } or { kind: 'circle', centre, radius }";

function checkPoint(point: unknown, key: string, tell: Tell): void {
  if (Array.isArray(point) && point.length === 2) for (const value of point) checkNumber(value, key, tell);
  else tell('bad-form', key, `must be a point, got ${shown(point)}`, 'a point is [x, y] in metres');
}

function checkNumber(value: unknown, key: string, tell: Tell): void {
  if (typeof value !== 'number') tell('bad-form', key, `must be a number, got ${shown(value)}`, 'give metres');
  else if (!Number.isFinite(value)) tell('not-finite', key, `is ${value}`, 'give a finite number of metres');
}

function checkMatched(matched: unknown, tell: Tell): void {
  if (matched === undefined) return;
  const isChain = (value: unknown): boolean =>
    typeof value === 'string' ||
    (Array.isArray(value) && value.length > 0 && value.every((s) => typeof s === 'string'));
  if (
    !Array.isArray(matched) ||
    !matched.every((pair) => Array.isArray(pair) && pair.length === 2 && pair.every(isChain))
  )
    tell(
      'bad-form',
      'matched',
      'must be a list of pairs of side names, or of lists of them',
      "for example [['left', 'right']]",
    );
}

function checkSizes(sizes: unknown, tell: Tell): void {
  if (sizes === undefined) return;
  if (!Array.isArray(sizes)) {
    tell('bad-form', 'sizeAt', `must be a list, got ${shown(sizes)}`, 'leave it out for none');
    return;
  }
  sizes.forEach((size, i) => {
    const key = `sizeAt.${i}`;
    if (!isGroup(size)) {
      tell('bad-form', key, `must be an object, got ${shown(size)}`, 'give at and maxEdge');
      return;
    }
    checkPoint(size.at, `${key}.at`, tell);
    if (!(typeof size.maxEdge === 'number' && size.maxEdge > 0)) {
      tell('bad-edge-length', `${key}.maxEdge`, `must be more than 0 m, got ${shown(size.maxEdge)}`, 'give a length');
    }
    if (size.growth !== undefined && !(typeof size.growth === 'number' && size.growth >= 0)) {
      tell('bad-form', `${key}.growth`, `must be 0 or more, got ${shown(size.growth)}`, 'leave it out for 0.3');
    }
  });
}
