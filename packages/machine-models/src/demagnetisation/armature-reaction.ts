import { weightedIntegral } from '@gapwright/fem-core/goals';
import type { RotorCurrent } from '../faults/rotor-current.js';
import { buildPoleWaves, factorWaves, solveWaves } from '../inductance/pole-waves.js';
import type { Machine } from '../machine.js';
import { armatureWaves, wavesOnRotor } from './armature-waves.js';
import type { FineSlice } from './fine-slice.js';
import { magnetSamples } from './magnet-samples.js';

/** B along the magnetisation at the samples of one magnet, T, by a current density cos(k x) (even) or sin(k x) (odd), 1 A/m^2. */
export interface WaveResponse {
  readonly even: Float64Array;
  readonly odd: Float64Array;
}

/**
 * The lowest that currents on the path make of B along the magnetisation, while the rotor takes every position before the
 * winding, T: at most 0, by magnet and sample; its mirror image about the magnet's axis counts too.
 *
 * Wave by wave of the winding's current and superposed; magnets without remanence, steel as permeable as the slice's own field
 * leaves it (chord). That the currents give saturated steel some of its permeability back is left out: H comes out larger by
 * less than 2 % even where discs are far too thin.
 *
 * @throws Error for a slice without a solution
 */
export function lowestReaction(
  machine: Machine,
  slice: FineSlice,
  path: readonly RotorCurrent[],
): ReadonlyMap<string, Float64Array> {
  const armature = armatureWaves(machine, slice.radius);
  const orders = armature.waves.map(({ order }) => order);
  const responses = waveResponses(slice, orders, machine.rotor.poles);
  // B is linear in the two parts of the current: what lies within others is never the worst.
  const instants = outermost(path).flatMap((current) => wavesOnRotor(armature, current));
  const count = orders.length;
  const re = Float64Array.from(
    { length: instants.length * count },
    (_, i) => instants[Math.floor(i / count)][i % count].re,
  );
  const im = Float64Array.from(
    { length: instants.length * count },
    (_, i) => instants[Math.floor(i / count)][i % count].im,
  );
  return new Map(
    [...responses].map(([region, waves]) => [
      region,
      Float64Array.from({ length: waves[0]?.even.length ?? 0 }, (_, i) =>
        lowestAt(
          waves.map(({ even }) => even[i]),
          waves.map(({ odd }) => odd[i]),
          { re, im },
        ),
      ),
    ]),
  );
}

/** At one sample, with the responses of its waves: over all instants, amplitudes of which follow each other wave by wave. */
function lowestAt(
  evens: readonly number[],
  odds: readonly number[],
  { re, im }: { readonly re: Float64Array; readonly im: Float64Array },
): number {
  let lowest = 0;
  for (let i = 0; i < re.length; i += evens.length) {
    let [even, odd] = [0, 0];
    for (let m = 0; m < evens.length; m++) {
      even += re[i + m] * evens[m];
      odd -= im[i + m] * odds[m];
    }
    lowest = Math.min(lowest, odd - Math.abs(even)); // the mirror image has the even part reversed
  }
  return lowest;
}

/** The corners of the convex hull of the path in the plane of its two parts (A. M. Andrew's chains, 1979; from memory). */
export function outermost(path: readonly RotorCurrent[]): readonly RotorCurrent[] {
  const sorted = [...path].sort((a, b) => a.direct - b.direct || a.quadrature - b.quadrature);
  const chain = (points: readonly RotorCurrent[]): RotorCurrent[] => {
    const kept: RotorCurrent[] = [];
    for (const point of points) {
      while (kept.length >= 2 && turn(kept[kept.length - 2], kept[kept.length - 1], point) <= 0) kept.pop();
      kept.push(point);
    }
    return kept;
  };
  if (sorted.length < 3) return sorted;
  return [...chain(sorted).slice(0, -1), ...chain(sorted.reverse()).slice(0, -1)];
}

/** Above 0 for a turn to the left from a over b to c. */
const turn = (a: RotorCurrent, b: RotorCurrent, c: RotorCurrent): number =>
  (b.direct - a.direct) * (c.quadrature - a.quadrature) - (b.quadrature - a.quadrature) * (c.direct - a.direct);

/** By magnet of the slice, the responses to waves of the given orders, whole waves round the shaft. */
export function waveResponses(
  slice: FineSlice,
  orders: readonly number[],
  poles: number,
): ReadonlyMap<string, readonly WaveResponse[]> {
  const { pole, field } = slice;
  const { mesh } = field;
  const equations = buildPoleWaves(slice);
  const found = new Map(pole.magnetRegions.map((region) => [region, [] as WaveResponse[]]));
  for (let around = 0; 2 * around <= poles; around++) {
    // From pole to pole a wave gains the phase k polePitch; beyond half a turn its mirror image is solved for.
    const which = orders.flatMap((order, m) => {
      const step = order % poles;
      return step === around || poles - step === around ? [{ m, order, mirrored: step !== around }] : [];
    });
    if (which.length === 0) continue;
    const phase = (2 * Math.PI * around) / poles; // exactly pi for half a turn
    const sources = which.map(({ order, mirrored }) => {
      const k = (2 * Math.PI * order) / (poles * pole.polePitch);
      const source = (shape: (x: number) => number): Float64Array =>
        weightedIntegral(mesh, ['winding'], (x) => shape(k * x), (2 * Math.PI) / k);
      return { even: source(Math.cos), odd: source(mirrored ? (a) => -Math.sin(a) : Math.sin) };
    });
    const solutions = solveWaves(equations, phase, factorWaves(equations, phase), sources);
    for (const [region, responses] of found) {
      const along = (potential: Float64Array): Float64Array => magnetSamples({ ...field, potential }, region).along;
      solutions.forEach(({ even, odd }, i) => {
        const { m, mirrored } = which[i];
        const oddPart = along(odd);
        responses[m] = { even: along(even), odd: mirrored ? oddPart.map((b) => -b) : oddPart };
      });
    }
  }
  return found;
}
