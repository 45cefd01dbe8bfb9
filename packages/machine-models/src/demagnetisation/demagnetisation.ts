import type { RotorCurrent } from '../faults/rotor-current.js';
import type { Machine, Warning } from '../machine.js';
import { kneeAt, remanenceAt } from '../materials/at-temperature.js';
import type { SolvedSlice } from '../slices/solve-slice.js';
import { lowestReaction } from './armature-reaction.js';
import { demagnetisationWarnings } from './demagnetisation-warnings.js';
import type { FineSlice } from './fine-slice.js';
import { solveFineSlice } from './fine-slice.js';
import { gradesThatHold, KEEP, marginOf, temperatureLimit } from './judge-magnet.js';
import type { JudgedMagnet, MagnetState } from './judged-magnet.js';
import { magnetOf } from './magnet-of.js';
import type { MagnetSamples } from './magnet-samples.js';
import { magnetSamples, worstPoint } from './magnet-samples.js';

export interface Demagnetisation {
  readonly magnets: readonly JudgedMagnet[];
  /**
   * Figures of the results: open circuit at the machine's magnet temperature, of the magnet with the least margin (lowest B
   * where none is known). Undefined where a slice has no solution.
   */
  readonly atRest: MagnetState | undefined;
  readonly warnings: readonly Warning[];
}

/**
 * Working points of all magnets, at the magnets' temperature and, where a material's coercivity falls in the cold, at the
 * coldest start; with the circuit open and under a short circuit.
 *
 * The solved slices tell which of them are worst; those, the first and the last are solved again, fine at the magnets' corners.
 * A short circuit is judged at its worst instant, wherever the rotor stands, by the fundamental of the currents, which go with
 * the remanence of the main magnets.
 *
 * @param slices  solved, by rising radius
 * @param path  currents after joining the terminals with the magnets at the machine's temperature (`shortCircuitPath`);
 * without it short circuits are not judged
 */
export function computeDemagnetisation(
  machine: Machine,
  slices: readonly SolvedSlice[],
  path: readonly RotorCurrent[] = [],
): Demagnetisation {
  const nothing = { magnets: [], atRest: undefined, warnings: [] };
  if (slices.length === 0 || slices.some(({ answer }) => !answer.converged)) return nothing;
  const { temperature } = machine.rotor.magnets;
  const main = magnetOf(machine).magnet;
  const radii = radiiToJudge(machine, slices);
  const states: RegionState[] = [];
  for (const celsius of [temperature, ...otherTemperatures(machine)]) {
    const there = atTemperature(machine, celsius);
    const fine = radii.map((radius) => solveFineSlice(there, radius));
    if (fine.some(({ field }) => !field.report.converged)) return nothing;
    const share = remanenceAt(main, celsius) / remanenceAt(main, temperature);
    const currents = path.map(({ direct, quadrature }) => ({ direct: share * direct, quadrature: share * quadrature }));
    states.push(...statesAt(there, fine, currents));
  }
  const magnets = [...new Set(states.map(({ region }) => region))].map((region) =>
    judge(
      machine,
      region,
      states.filter((state) => state.region === region),
    ),
  );
  const atRest = states.filter(({ circuit, celsius }) => circuit === 'open' && celsius === temperature).reduce(worse);
  return { magnets, atRest, warnings: demagnetisationWarnings(magnets) };
}

/** The first, the last, and those where some magnet is worst off with the circuit open. */
function radiiToJudge(machine: Machine, slices: readonly SolvedSlice[]): readonly number[] {
  const open = slices.map(({ answer, field, pole }) => openStates(machine, { radius: answer.radius, field, pole }));
  const worst = worstOfEach(open.flat()).map(({ radius }) => radius);
  const radii = slices.map(({ answer }) => answer.radius);
  return radii.filter((radius, i) => i === 0 || i === radii.length - 1 || worst.includes(radius));
}

/** Where some material loses coercivity in the cold: the coldest start. */
function otherTemperatures({ rotor, operation, materials }: Machine): readonly number[] {
  const { cold } = operation;
  const names = [rotor.magnets.material, ...(rotor.interpoles === undefined ? [] : [rotor.interpoles.material])];
  const suffers = names.some((name) => {
    const material = materials[name];
    return material.kind === 'magnet' && (material.coercivitySlope ?? 0) > 0;
  });
  return cold !== undefined && suffers && cold < rotor.magnets.temperature ? [cold] : [];
}

function atTemperature(machine: Machine, temperature: number): Machine {
  const { rotor } = machine;
  return { ...machine, rotor: { ...rotor, magnets: { ...rotor.magnets, temperature } } };
}

type RegionState = MagnetState & { readonly region: string };

/** Worst states of all magnets of a machine at its magnets' temperature: open, and short where there are currents. */
function statesAt(machine: Machine, slices: readonly FineSlice[], path: readonly RotorCurrent[]): RegionState[] {
  const open = worstOfEach(slices.flatMap((slice) => openStates(machine, slice)));
  if (path.length === 0) return open;
  return [...open, ...worstOfEach(slices.flatMap((slice) => shortStates(machine, slice, path)))];
}

function openStates(machine: Machine, slice: FineSlice): RegionState[] {
  return slice.pole.magnetRegions.map((region) => {
    const samples = magnetSamples(slice.field, region);
    return stateOf(machine, slice.radius, samples, 'open', samples.along);
  });
}

function shortStates(machine: Machine, slice: FineSlice, path: readonly RotorCurrent[]): RegionState[] {
  return [...lowestReaction(machine, slice, path)].map(([region, reaction]) => {
    const samples = magnetSamples(slice.field, region);
    const along = samples.along.map((b, i) => b + reaction[i]);
    return stateOf(machine, slice.radius, samples, 'short', along);
  });
}

function stateOf(
  machine: Machine,
  radius: number,
  samples: MagnetSamples,
  circuit: MagnetState['circuit'],
  along: Float64Array,
): RegionState {
  const { magnet } = magnetOf(machine, samples.region);
  const celsius = machine.rotor.magnets.temperature;
  const point = worstPoint(samples, along);
  return {
    ...point,
    region: samples.region,
    celsius,
    circuit,
    radius,
    knee: kneeAt(magnet, celsius),
    margin: marginOf(magnet, { celsius, h: point.h }),
  };
}

function worstOfEach(states: readonly RegionState[]): RegionState[] {
  const worst = new Map<string, RegionState>();
  for (const state of states) {
    const before = worst.get(state.region);
    worst.set(state.region, before === undefined ? state : worse(before, state));
  }
  return [...worst.values()];
}

/** The one with less room. */
function worse<State extends MagnetState>(a: State, b: State): State {
  if (a.margin !== undefined && b.margin !== undefined) return b.margin < a.margin ? b : a;
  if (a.margin === undefined && b.margin === undefined) return b.b < a.b ? b : a;
  return a.margin === undefined ? b : a;
}

function judge(machine: Machine, region: string, states: readonly RegionState[]): JudgedMagnet {
  const { name: material, magnet } = magnetOf(machine, region);
  const worst = states.reduce(worse);
  const lacking = states.some(({ margin }) => margin !== undefined && margin < KEEP);
  return {
    region,
    material,
    states,
    worst,
    limit: temperatureLimit(magnet, worst),
    betterGrades: lacking ? gradesThatHold(material, magnet, states) : [],
  };
}
