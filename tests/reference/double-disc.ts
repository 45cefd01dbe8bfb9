import type { Field, Locator, Material, Section, Setup } from '@gapwright/fem-core';
import { buildLocator } from '@gapwright/fem-core';
import type { Functional, Goal } from '@gapwright/fem-core/goals';
import { pointPotential, stressFunctional, stressThrough, weightedIntegral } from '@gapwright/fem-core/goals';
import type { DiscGap } from '../../packages/fem-core/src/verify/double-disc.js';
import {
  G1,
  G2,
  G3,
  G4,
  seriesAmplitude,
  seriesFlux,
  seriesPull,
} from '../../packages/fem-core/src/verify/double-disc.js';

export type Gap = DiscGap;
export { G1, G2, G3, G4, seriesAmplitude, seriesFlux, seriesPull };

/** Mean of By's harmonic over heights from -t to t (or 0 to t). */
export function seriesMean(g: Gap, n: number, t: number): number {
  const x = ((n * Math.PI) / g.polePitch) * t;
  return (seriesAmplitude(g, n, 0) * Math.sinh(x)) / x;
}

/** Share of halfGap up to which the averages are taken, and where the line off the mid-plane runs: 0.3 of a twin's gap. */
const LAYER = 0.6;

/**
 * Half a pole from its axis to midway between poles, from the plane of zero potential to the disc. The natural condition
 * on the disc's face stands for infinite permeability; `between` fills the room between the magnets.
 */
export function halfPole(g: Gap, between: 'recoil' | 'air'): { readonly section: Section; readonly setup: Setup } {
  const [half, top] = [g.polePitch / 2, g.halfGap + g.height];
  const magnet: Material = { kind: 'magnet', recoil: g.recoil, remanence: [0, g.remanence] };
  const air: Material = { kind: 'linear', muR: 1 };
  return {
    section: {
      outline: { kind: 'rectangle', from: [0, 0], to: [half, top] },
      background: 'between',
      maxEdge: g.polePitch / 10,
      regions: [
        { name: 'upper gap', shape: { kind: 'rectangle', from: [0, 0], to: [half, g.halfGap] } },
        { name: 'layer', shape: { kind: 'rectangle', from: [0, 0], to: [half, LAYER * g.halfGap] } },
        { name: 'magnet', shape: { kind: 'rectangle', from: [0, g.halfGap], to: [g.width / 2, top] } },
      ],
    },
    setup: {
      materials: {
        'upper gap': air,
        layer: air,
        magnet,
        between: between === 'air' ? air : { kind: 'linear', muR: g.recoil },
      },
      edges: {
        left: { kind: 'closed' },
        right: { kind: 'crossing' },
        bottom: { kind: 'crossing' },
        top: { kind: 'crossing' },
      },
    },
  };
}

/** An answer wanted of the half pole, with what the series says of it. */
export interface Wanted {
  readonly quantity: string;
  readonly expected: number;
  /** Harmonics of By are judged against the fundamental on the plane of zero potential, the others against themselves. */
  readonly kind: 'harmonic' | 'other';
  readonly goal: Goal;
}

export function wantedOf(g: Gap): Wanted[] {
  const wanted: Wanted[] = [];
  for (const n of [1, 3, 5]) {
    const add = (where: string, expected: number, functional: Goal['functional']): void => {
      const quantity = `B_${n} ${where}`;
      wanted.push({ quantity, expected, kind: 'harmonic', goal: { name: quantity, functional } });
    };
    add('at the mid-plane', seriesAmplitude(g, n, 0), (field) => lineHarmonic(g, field, n, 0));
    add('off it', seriesAmplitude(g, n, LAYER * g.halfGap), (field) => lineHarmonic(g, field, n, LAYER * g.halfGap));
    add('over a thickness', seriesMean(g, n, LAYER * g.halfGap), (field) => layerHarmonic(g, field, n));
  }
  const flux = 'flux per pole at the mid-plane';
  const functional = (field: Field): Functional => {
    const spot = spotAt(buildLocator(field.mesh), g.polePitch / 2, 0);
    return pointPotential(field.mesh, spot).map((value) => -2 * value);
  };
  wanted.push({ quantity: flux, expected: seriesFlux(g, 0), kind: 'other', goal: { name: flux, functional } });
  const slope = (): readonly [number, number] => [0, 2 / (LAYER * g.halfGap)]; // twice: half a pole is drawn
  wanted.push({
    quantity: 'pull per pole',
    expected: seriesPull(g),
    kind: 'other',
    goal: {
      name: 'pull',
      functional: (field) => stressFunctional(field, ['layer'], slope).map((value) => -value),
      value: (field) => -stressThrough(field, ['layer'], slope).fy,
    },
  });
  return wanted;
}

function spotAt(locator: Locator, x: number, y: number): NonNullable<ReturnType<Locator['find']>> {
  const spot = locator.find(x, y);
  if (spot === undefined) throw new Error(`(${x}, ${y}) lies outside`);
  return spot;
}

/** A = -sum (B_n/k) sin(k x), so B_n = -(4 k/tau) integral of A sin(k x) over half a pole: midpoint rule, 400 stations. */
function lineHarmonic(g: Gap, field: Field, n: number, y: number): Functional {
  const stations = 400;
  const k = (n * Math.PI) / g.polePitch;
  const locator = buildLocator(field.mesh);
  const sum = new Float64Array(field.potential.length);
  for (let j = 0; j < stations; j++) {
    const x = ((j + 0.5) * g.polePitch) / (2 * stations);
    const weight = ((-4 * k) / g.polePitch) * (g.polePitch / (2 * stations)) * Math.sin(k * x);
    pointPotential(field.mesh, spotAt(locator, x, y)).forEach((value, i) => {
      if (value !== 0) sum[i] += weight * value;
    });
  }
  return sum;
}

function layerHarmonic(g: Gap, field: Field, n: number): Functional {
  const k = (n * Math.PI) / g.polePitch;
  const factor = (-4 * k) / (g.polePitch * LAYER * g.halfGap);
  return weightedIntegral(field.mesh, ['layer'], (x) => factor * Math.sin(k * x));
}
