import { materialOf, VACUUM } from '../assembly/setup.js';
import { MU0 } from '../base/constants.js';
import { unreachable } from '../base/unreachable.js';
import { NODES } from '../elements/six-node.js';
import type { RecoveredGradient } from '../estimate/recovery.js';
import { airLayer } from '../field/air-layer.js';
import type { Field } from '../field/field.js';
import { forceFunctionals, forceOn, forceRemainder, stressSize } from '../field/force.js';
import type { Functional } from '../field/functionals.js';
import { applyFunctional, pointPotential, weightedFlux, weightedIntegral } from '../field/functionals.js';
import { forEachSample, meanOver } from '../field/integrals.js';
import type { Locator } from '../field/locate.js';
import { shrinkage, spotOf, valueAt, valueAtSpot } from '../field/values.js';
import type { Point } from '../geometry/section.js';
import { evaluateMaterial, newLaw } from '../materials/constitutive.js';
import { areaOf, densityRemainder, meanDensityFunctional, meanInTriangle } from './goals.js';
import type { Answer, PlaceError, Probe } from './probe.js';

/** An answer's number, its derivative, and what its error is to be measured by. */
export interface Figure {
  readonly value: number;
  readonly functional: Functional;
  /** The largest of a kind is what the wanted accuracy is relative to; absent for figures that only report. */
  readonly size?: number;
  readonly remainder?: (recovered: RecoveredGradient) => Float64Array;
}

/** A probe at a field: its figures, and the answer once their error bounds are known. */
export interface ProbeAt {
  readonly kind: Probe['kind'];
  readonly figures: readonly Figure[];
  readonly describe: (bounds: readonly number[], recovered: RecoveredGradient) => Answer;
}

/** Places along a line at which the error of A is estimated. */
const LINE_SAMPLES = 5;
/**
 * A figure below this share of what there is of its kind is measured by that instead: of the stress all round a body, of all
 * the flux, of the flux density. What symmetry makes nought would else be refined for ever.
 */
const BALANCED = 0.01;

/** A body that has hardly any field about it: the same, of the mean stress of the section all round the body. */
const STRESSLESS = 1e-5;

/** What there is in a section: flux between its least and its greatest A, Wb/m, and flux density, T. */
interface Extent {
  readonly flux: number;
  readonly density: number;
}

/** By the field, or where magnets close on themselves and leave none, by what they would store without flux. */
function extentOf(field: Field): Extent {
  let [low, high] = [Infinity, -Infinity];
  for (const a of field.potential) {
    low = Math.min(low, a);
    high = Math.max(high, a);
  }
  let [area, square, remanent] = [0, 0, 0];
  const law = newLaw();
  forEachSample(field, 'all', (s) => {
    area += s.area;
    square += s.area * (s.bx * s.bx + s.by * s.by);
    remanent += s.area * evaluateMaterial(s.material, 0, 0, s.x, s.y, law).energy;
  });
  const density = Math.sqrt(Math.max(square, 2 * MU0 * remanent) / area);
  return { flux: Math.max(high - low, density * Math.sqrt(area)), density };
}

/** Of probes that `checkProbesOn` has let pass. */
export function probeAt(probe: Probe, field: Field, locator: Locator): ProbeAt {
  switch (probe.kind) {
    case 'point':
      return pointAt(probe, field, locator);
    case 'line':
      return lineAt(probe, field, locator);
    case 'force':
      return forceAt(probe, field);
    case 'linkage':
      return linkageAt(probe, field);
    case 'flux':
      return fluxAt(probe, field, locator);
    case 'mean':
      return meanAt(probe, field);
    default:
      return unreachable(probe);
  }
}

/** A at a place, or undefined outside the section; reports only. */
function potentialFigure(field: Field, locator: Locator, [x, y]: Point): Figure | undefined {
  const spot = spotOf(field, locator, x, y);
  if (spot === undefined) return undefined;
  const functional = pointPotential(field.mesh, spot);
  return { value: applyFunctional(functional, field.potential), functional };
}

/**
 * Error of the flux density at a place, T: the gap between recovered and element flux density, in the root mean square of the
 * nodes of its triangle. The recovered one, which is told, is usually far better.
 */
function gapAt(field: Field, locator: Locator, [x, y]: Point, recovered: RecoveredGradient): number {
  const spot = spotOf(field, locator, x, y);
  if (spot === undefined) return Number.NaN;
  let squares = 0;
  for (const [xi, eta] of NODES) {
    const node = { triangle: spot.triangle, xi, eta };
    const [fine, coarse] = [valueAtSpot(field, node, recovered), valueAtSpot(field, node)];
    squares += (fine.bx - coarse.bx) ** 2 + (fine.by - coarse.by) ** 2;
  }
  return Math.sqrt(squares / NODES.length) * shrinkage(field, x, y);
}

function pointAt(probe: Extract<Probe, { kind: 'point' }>, field: Field, locator: Locator): ProbeAt {
  const figure = potentialFigure(field, locator, probe.at);
  return {
    kind: 'point',
    figures: figure === undefined ? [] : [figure, ...densityFigures(field, locator, probe.at)],
    describe: ([a = Number.NaN, bx = 0, by = 0], recovered) => ({
      kind: 'point',
      name: probe.name,
      value: valueAt(field, locator, ...probe.at, recovered),
      error: withStrength(
        field,
        locator,
        probe.at,
        a,
        gapAt(field, locator, probe.at, recovered) + shrinkage(field, ...probe.at) * Math.hypot(bx, by),
      ),
    }),
  };
}

/** Errors of A and B, and of H = H(B) by the steepest direction of dH/dB there. */
function withStrength(field: Field, locator: Locator, [x, y]: Point, a: number, b: number): PlaceError {
  const spot = spotOf(field, locator, x, y);
  if (spot === undefined) return { a, b, h: Number.NaN };
  const { bx, by } = valueAtSpot(field, spot);
  const { mesh, setup } = field;
  const material = materialOf(setup, mesh.regionNames[mesh.triangleToRegion[spot.triangle]]) ?? VACUUM;
  const { xx, xy, yy } = evaluateMaterial(material, bx, by, x, y, newLaw());
  return { a, b, h: b * (0.5 * (xx + yy) + Math.hypot(0.5 * (xx - yy), xy)) };
}

/** Mean flux density over the triangle that holds a place: what errors from afar do there; reports only. */
function densityFigures(field: Field, locator: Locator, [x, y]: Point): readonly Figure[] {
  const spot = spotOf(field, locator, x, y);
  if (spot === undefined) return [];
  return meanInTriangle(field, spot.triangle).map((functional) => ({
    value: applyFunctional(functional, field.potential),
    functional,
  }));
}

function lineAt(probe: Extract<Probe, { kind: 'line' }>, field: Field, locator: Locator): ProbeAt {
  const { from, to, points, name } = probe;
  const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
  const share = (i: number): number => (points === 1 ? 0.5 : i / (points - 1));
  const place = (s: number): Point => [from[0] + s * (to[0] - from[0]), from[1] + s * (to[1] - from[1])];
  const samples = Array.from({ length: LINE_SAMPLES }, (_, k) => (k + 0.5) / LINE_SAMPLES);
  const sampled = samples.map((s) => potentialFigure(field, locator, place(s)));
  const figures = sampled.filter((figure) => figure !== undefined);
  return {
    kind: 'line',
    figures,
    describe: (bounds, recovered) => {
      const a = bounds.length === 0 ? Number.NaN : Math.max(...bounds);
      const places = Array.from({ length: points }, (_, i) => place(share(i)));
      return {
        kind: 'line',
        name,
        distance: places.map((_, i) => share(i) * length),
        values: places.map(([x, y]) => valueAt(field, locator, x, y, recovered)),
        errors: places.map((at) => withStrength(field, locator, at, a, gapAt(field, locator, at, recovered))),
      };
    },
  };
}

function forceAt({ name, on, about = [0, 0] }: Extract<Probe, { kind: 'force' }>, field: Field): ProbeAt {
  const layer = airLayer(field, on);
  const { fx, fy, torque } = forceOn(field, on, about, layer);
  const by = forceFunctionals(field, about, layer);
  const stress = stressSize(field, layer, about);
  const known = (value: number): number => (Number.isNaN(value) ? 0 : value); // of a body cut in two
  const mean = extentOf(field).density ** 2 / (2 * MU0);
  const size = Math.max(Math.hypot(known(fx), known(fy)), BALANCED * stress.force, STRESSLESS * mean * stress.length);
  const push = (recovered: RecoveredGradient): Float64Array => forceRemainder(field, layer, recovered);
  const twist = (recovered: RecoveredGradient): Float64Array => forceRemainder(field, layer, recovered, about);
  const bound = (value: number): { readonly size?: number } => (Number.isNaN(value) ? {} : { size });
  return {
    kind: 'force',
    figures: [
      { value: fx, functional: by.fx, ...bound(fx), remainder: push },
      { value: fy, functional: by.fy, ...bound(fy), remainder: push },
      { value: torque, functional: by.torque, remainder: twist },
    ],
    describe: ([ex, ey, torqueError]) => ({
      kind: 'force',
      name,
      fx,
      fy,
      torque,
      error: {
        force: Math.hypot(Number.isNaN(fx) ? 0 : ex, Number.isNaN(fy) ? 0 : ey),
        torque: Number.isNaN(torque) ? Number.NaN : torqueError,
      },
    }),
  };
}

function linkageAt({ name, of, turns }: Extract<Probe, { kind: 'linkage' }>, field: Field): ProbeAt {
  const area = areaOf(field, [of]);
  const functional = weightedIntegral(field.mesh, [of], () => turns / area);
  const linkage = applyFunctional(functional, field.potential);
  return {
    kind: 'linkage',
    figures: [
      {
        value: linkage,
        functional,
        size: Math.max(Math.abs(linkage), Math.abs(turns) * BALANCED * extentOf(field).flux),
      },
    ],
    describe: ([error]) => ({ kind: 'linkage', name, linkage, error }),
  };
}

function fluxAt({ name, from, to }: Extract<Probe, { kind: 'flux' }>, field: Field, locator: Locator): ProbeAt {
  const [start, end] = [potentialFigure(field, locator, from), potentialFigure(field, locator, to)];
  if (start === undefined || end === undefined) {
    return {
      kind: 'flux',
      figures: [],
      describe: () => ({ kind: 'flux', name, flux: Number.NaN, error: Number.NaN }),
    };
  }
  const flux = start.value - end.value;
  const functional = start.functional.map((g, node) => g - end.functional[node]);
  return {
    kind: 'flux',
    figures: [{ value: flux, functional, size: Math.max(Math.abs(flux), BALANCED * extentOf(field).flux) }],
    describe: ([error]) => ({ kind: 'flux', name, flux, error }),
  };
}

function meanAt({ name, over }: Extract<Probe, { kind: 'mean' }>, field: Field): ProbeAt {
  const area = areaOf(field, over);
  const { bx, by, b } = meanOver(field, over);
  const size = Math.max(b, BALANCED * extentOf(field).density);
  const alongX = weightedFlux(field.mesh, over, () => [1 / area, 0]);
  const alongY = weightedFlux(field.mesh, over, () => [0, 1 / area]);
  const bend = (recovered: RecoveredGradient): Float64Array => densityRemainder(field, over, area, recovered);
  return {
    kind: 'mean',
    figures: [
      { value: bx, functional: alongX, size },
      { value: by, functional: alongY, size },
      { value: b, functional: meanDensityFunctional(field, over, area), size, remainder: bend },
    ],
    describe: ([ex, ey, eb]) => ({ kind: 'mean', name, bx, by, b, error: Math.max(Math.hypot(ex, ey), eb) }),
  };
}
