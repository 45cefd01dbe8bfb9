import type { EdgeCondition } from '../assembly/setup.js';
import { MU0 } from '../base/constants.js';
import { buildBHCurve } from '../materials/bh-curve.js';
import type { Material } from '../materials/material.js';
import { stackedTable } from '../materials/stacking.js';
import { POINT } from './conductors.js';
import { AIR, allSides, disc, held, rectangularSection, roundSection } from './drawing.js';
import {
  energyDensityAt,
  fieldStrengthAt,
  fluxDensityAt,
  integrate,
  KNEE,
  LAW_ROWS,
  lawCurve,
  SATURATION,
} from './laws.js';
import { energyOf, fluxOf, magnitudeAt, meanOf } from './readings.js';
import type { VerificationCase } from './verification-case.js';

const LAW = 'B = mu0 H + Js H/(H + h)';
const FROEHLICH = "Ampere's law and the steel of Froehlich and Kennelly; computed here";

const steel = (): Material => ({ kind: 'curve', curve: lawCurve() });

/** Flux through a ring of that steel round a current, Wb/m. */
function ringFlux(current: number, inner: number, outer: number): number {
  const c = 2 * Math.PI * KNEE;
  const polarised = ((SATURATION * current) / c) * Math.log((current + c * outer) / (current + c * inner));
  return polarised + ((MU0 * current) / (2 * Math.PI)) * Math.log(outer / inner);
}

/** A steel ring round a conductor: H = I/(2 pi r) whatever the steel. */
export function saturableRing(current: number): VerificationCase {
  const [wire, inner, outer] = [0.005, 0.02, 0.05];
  const inAir = ((MU0 * current ** 2) / (4 * Math.PI)) * (0.25 + Math.log(inner / wire));
  const inSteel = integrate((r) => 2 * Math.PI * r * energyDensityAt(current / (2 * Math.PI * r)), inner, outer);
  return {
    name: `saturable ring round ${current} A`,
    formula: `H = I/(2 pi r), ${LAW}, integrated over the ring`,
    source: FROEHLICH,
    section: roundSection(outer, 'ring', [disc('window', inner), disc('wire', wire)]),
    setup: {
      materials: { ring: steel(), window: AIR, wire: AIR },
      current: { wire: current },
    },
    probes: [
      { kind: 'flux', name: 'ring', from: [inner, 0], to: [outer, 0] },
      { kind: 'point', name: 'inside', at: [-0.03, 0] },
    ],
    accuracy: 1e-3,
    figures: [
      { quantity: 'flux, Wb/m', expected: ringFlux(current, inner, outer), read: fluxOf('ring') },
      { quantity: 'energy, J/m', expected: inAir + inSteel, read: energyOf },
      {
        quantity: 'B at 30 mm, T',
        expected: fluxDensityAt(current / (2 * Math.PI * 0.03)),
        read: magnitudeAt('inside'),
        bound: POINT,
      },
    ],
  };
}

/** Saturated steel whose flux spreads from a far line: B = c/r along the radius satisfies any isotropic law. */
export function radialFlux(): VerificationCase {
  const [near, far, half, c] = [0.01, 0.03, 0.01, 0.02]; // 2 T at the near end
  const over = (f: (r: number) => number): number =>
    integrate((x) => 2 * integrate((y) => f(Math.hypot(x, y)), 0, half, 20), near, far, 400);
  const area = 2 * half * (far - near);
  return {
    name: 'radial flux in saturable steel',
    formula: `B = c/r, ${LAW}; energy integral of H dB`,
    source: `curl and divergence vanish for any isotropic law; computed here`,
    section: rectangularSection([near, -half], [far, half], 'steel', []),
    setup: { materials: { steel: steel() }, edges: allSides(held((x, y) => c * Math.atan2(y, x))) },
    probes: [
      { kind: 'mean', name: 'steel', over: ['steel'] },
      { kind: 'point', name: 'inside', at: [0.016, 0.005] },
    ],
    accuracy: 1e-3,
    figures: [
      {
        quantity: 'energy, J/m',
        expected: over((r) => energyDensityAt(fieldStrengthAt(c / r))),
        read: energyOf,
      },
      { quantity: 'mean |B|, T', expected: over((r) => c / r) / area, read: meanOf('steel', 'b') },
      {
        quantity: 'B at (16, 5) mm, T',
        expected: c / Math.hypot(0.016, 0.005),
        read: magnitudeAt('inside'),
        bound: POINT,
      },
    ],
  };
}

/** Ampere-turns on a straight path of sheets that lie in the section's plane. */
export function stackedSlab(): VerificationCase {
  const [half, coil, height, factor] = [0.01, 0.004, 0.006, 0.95];
  const [strength, b] = LAW_ROWS[300];
  const natural: EdgeCondition = { kind: 'crossing' };
  const expected = factor * b + (1 - factor) * MU0 * strength;
  return {
    name: 'stack of sheets under given ampere-turns',
    formula: 'B = k B(H) + (1 - k) mu0 H',
    source: "Ampere's law; sheets and gaps side by side under one H; computed here",
    section: rectangularSection([0, 0], [half + coil, height], 'coil', [
      { name: 'stack', shape: { kind: 'rectangle', from: [0, 0], to: [half, height] } },
    ]),
    setup: {
      materials: { stack: { kind: 'curve', curve: buildBHCurve(stackedTable(LAW_ROWS, factor)) }, coil: AIR },
      currentDensity: { coil: -strength / coil },
      edges: { left: { kind: 'closed' }, right: natural, top: natural, bottom: natural },
    },
    probes: [{ kind: 'mean', name: 'stack', over: ['stack'] }],
    accuracy: 1e-3,
    figures: [{ quantity: 'B, T', expected, read: meanOf('stack', 'by') }],
  };
}
