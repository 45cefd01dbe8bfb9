import { materialOf, VACUUM } from '../assembly/setup.js';
import { MU0 } from '../base/constants.js';
import { globalNode, gradients, nodeCoordinates, shapeSlopes, shapeValues } from '../elements/six-node.js';
import { evaluateMaterial, newLaw } from '../materials/constitutive.js';
import type { Material } from '../materials/material.js';
import type { Beyond } from '../mesh/mesh.js';
import type { Field } from './field.js';
import type { Locator, Spot } from './locate.js';

/** The field at one place. */
export interface FieldValue {
  /** Vector potential out of the page, Wb/m. */
  readonly a: number;
  /** Flux density along x, T. */
  readonly bx: number;
  /** Along y, T. */
  readonly by: number;
  /** Field strength along x, A/m. */
  readonly hx: number;
  /** Along y, A/m. */
  readonly hy: number;
  /** Relative permeability: B/(mu0 H), of magnets that of the recoil. */
  readonly muR: number;
  /** J/m^3: integral of H dB, of magnets from the remanence. */
  readonly energy: number;
  /** J/m^3: H . B less the energy. */
  readonly coenergy: number;
}

/**
 * A, B and H at a spot of a triangle.
 * @param recovered  gradient of A as `recoverGradients` gives it, Float64Array(12 m): B is read from it; straight from the
 * elements where it is absent
 */
export function valueAtSpot(field: Field, spot: Spot, recovered?: Float64Array): FieldValue {
  const { mesh, potential } = field;
  const shapes = shapeValues(spot.xi, spot.eta, new Float64Array(6));
  const at = nodeCoordinates(mesh, spot.triangle, new Float64Array(12));
  const grad = new Float64Array(12);
  if (recovered === undefined) gradients(at, shapeSlopes(spot.xi, spot.eta, new Float64Array(12)), 0, grad);
  let [a, gx, gy, x, y] = [0, 0, 0, 0, 0];
  for (let i = 0; i < 6; i++) {
    const value = potential[globalNode(mesh, spot.triangle, i)];
    a += value * shapes[i];
    x += at[2 * i] * shapes[i];
    y += at[2 * i + 1] * shapes[i];
    gx += recovered === undefined ? value * grad[i] : shapes[i] * recovered[12 * spot.triangle + i];
    gy += recovered === undefined ? value * grad[6 + i] : shapes[i] * recovered[12 * spot.triangle + 6 + i];
  }
  const material = materialOf(field.setup, mesh.regionNames[mesh.triangleToRegion[spot.triangle]]) ?? VACUUM;
  return describePoint(material, a, gy, -gx, x, y);
}

function describePoint(material: Material, a: number, bx: number, by: number, x: number, y: number): FieldValue {
  const { hx, hy, nu, energy } = evaluateMaterial(material, bx, by, x, y, newLaw());
  return { a, bx, by, hx, hy, muR: 1 / (MU0 * nu), energy, coenergy: hx * bx + hy * by - energy };
}

/**
 * The triangle that holds a point: in unbounded space, of points beyond the circle, that of the image; undefined outside a
 * bounded section.
 */
export function spotOf({ mesh: { beyond } }: Field, locator: Locator, x: number, y: number): Spot | undefined {
  if (beyond === undefined || !liesBeyond(beyond, x, y)) return locator.find(x, y);
  const { centre, radius, imageCentre } = beyond;
  const [dx, dy] = [x - centre[0], y - centre[1]];
  const shrink = (radius / Math.hypot(dx, dy)) ** 2;
  return locator.find(imageCentre[0] + shrink * dx, imageCentre[1] + shrink * dy);
}

const liesBeyond = ({ centre, radius }: Beyond, x: number, y: number): boolean =>
  Math.hypot(x - centre[0], y - centre[1]) > radius;

/** What flux densities of the triangle that `spotOf` gives are to be multiplied by: (R/r)^2 for images, else 1. */
export function shrinkage({ mesh: { beyond } }: Field, x: number, y: number): number {
  if (beyond === undefined || !liesBeyond(beyond, x, y)) return 1;
  return (beyond.radius / Math.hypot(x - beyond.centre[0], y - beyond.centre[1])) ** 2;
}

/**
 * The field at (x, y) in metres; undefined outside the section. In unbounded space every point has a value.
 * @param locator  of the field's mesh
 * @param recovered  gradient of A of superconvergent accuracy, Float64Array(12 m), as `SectionAnswer` holds it and
 * `recoverGradients` gives it: B is read from it; straight from the elements where it is absent
 */
export function valueAt(
  field: Field,
  locator: Locator,
  x: number,
  y: number,
  recovered?: Float64Array,
): FieldValue | undefined {
  const spot = spotOf(field, locator, x, y);
  if (spot === undefined) return undefined;
  const value = valueAtSpot(field, spot, recovered);
  const { beyond } = field.mesh;
  return beyond !== undefined && liesBeyond(beyond, x, y)
    ? turnedOut(value, beyond, field.netCurrent ?? 0, x, y)
    : value;
}

/**
 * From the image to the point itself. The image stands at R^2/r under the same angle, with the same A; of the gradient the
 * part round the circle keeps its sign, the radial part changes it, and both shrink by (R/r)^2. The net current I returns
 * evenly through the image, not at infinity: dA/dr lacks -mu0 I/(2 pi r) (1 - R^2/r^2).
 */
function turnedOut(image: FieldValue, { centre, radius }: Beyond, net: number, x: number, y: number): FieldValue {
  const [dx, dy] = [x - centre[0], y - centre[1]];
  const far2 = dx * dx + dy * dy;
  const shrink = (radius * radius) / far2;
  const [gx, gy] = [-image.by, image.bx];
  const radial = (2 * (gx * dx + gy * dy)) / far2 + ((MU0 * net) / (2 * Math.PI * radius * radius)) * (1 - shrink);
  const a = image.a - ((MU0 * net) / (4 * Math.PI)) * (Math.log(far2 / (radius * radius)) - 1 + shrink);
  return describePoint(VACUUM, a, shrink * (gy - radial * dy), -shrink * (gx - radial * dx), x, y);
}

/**
 * The field at `count` equally spaced points from one end to the other, ends included, or at the middle where `count` is 1;
 * undefined for points outside. See `valueAt`.
 */
export function valuesAlong(
  field: Field,
  locator: Locator,
  from: readonly [number, number],
  to: readonly [number, number],
  count: number,
  recovered?: Float64Array,
): (FieldValue | undefined)[] {
  return Array.from({ length: count }, (_, i) => {
    const s = count === 1 ? 0.5 : i / (count - 1);
    return valueAt(field, locator, from[0] + s * (to[0] - from[0]), from[1] + s * (to[1] - from[1]), recovered);
  });
}

/**
 * Flux through the line between two points, Wb per metre of depth: A(from) - A(to), positive along +y on a way to the right;
 * undefined where an end lies outside the section.
 */
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
