import { globalNode, shapeValues } from '../elements/six-node.js';
import type { LocalLaw } from '../materials/constitutive.js';
import { evaluateMaterial, remanenceOf } from '../materials/constitutive.js';
import type { Field } from './field.js';
import type { Locator, Spot } from './locate.js';
import { gradientsAt } from './locate.js';

/** The field at one place. */
export interface FieldValue {
  /** Vector potential out of the page, Wb/m. */
  readonly a: number;
  /** Flux density, T. */
  readonly bx: number;
  readonly by: number;
  /** Field strength, A/m. */
  readonly hx: number;
  readonly hy: number;
}

const shapes = new Float64Array(6);
const grad = new Float64Array(12);
const law: LocalLaw = { nu: 0, spread: 0, energy: 0 };

/** A, B and H at a spot of a triangle, straight from the elements. */
export function valueAtSpot(field: Field, spot: Spot): FieldValue {
  const { mesh, potential, setup } = field;
  shapeValues(spot.xi, spot.eta, shapes);
  gradientsAt(mesh, spot, grad);
  let a = 0;
  let gx = 0;
  let gy = 0;
  for (let i = 0; i < 6; i++) {
    const value = potential[globalNode(mesh, spot.triangle, i)];
    a += value * shapes[i];
    gx += value * grad[i];
    gy += value * grad[6 + i];
  }
  const bx = gy;
  const by = -gx;
  const material = setup.materials[mesh.regionNames[mesh.triangleToRegion[spot.triangle]]];
  evaluateMaterial(material, bx, by, law);
  const [rx, ry] = remanenceOf(material);
  return { a, bx, by, hx: law.nu * (bx - rx), hy: law.nu * (by - ry) };
}

/** The field at (x, y) in metres; undefined outside the section. */
export function valueAt(field: Field, locator: Locator, x: number, y: number): FieldValue | undefined {
  const spot = locator.find(x, y);
  return spot === undefined ? undefined : valueAtSpot(field, spot);
}

/** The field at `count` equally spaced points from one end to the other, ends included; undefined for points outside. */
export function valuesAlong(
  field: Field,
  locator: Locator,
  from: readonly [number, number],
  to: readonly [number, number],
  count: number,
): (FieldValue | undefined)[] {
  return Array.from({ length: count }, (_, i) => {
    const s = count === 1 ? 0.5 : i / (count - 1);
    return valueAt(field, locator, from[0] + s * (to[0] - from[0]), from[1] + s * (to[1] - from[1]));
  });
}

/** Flux through the line between two points, Wb per metre of depth: A(from) - A(to), positive along +y on a way to the right. */
export function fluxBetween(
  field: Field,
  locator: Locator,
  from: readonly [number, number],
  to: readonly [number, number],
): number | undefined {
  const start = valueAt(field, locator, from[0], from[1]);
  const end = valueAt(field, locator, to[0], to[1]);
  return start === undefined || end === undefined ? undefined : start.a - end.a;
}
