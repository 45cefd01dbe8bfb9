import { describeCosts } from '../costs/costs.js';
import type { Disc, LibraryMaterial, Machine, Prices, Rotor } from '../machine.js';
import type { Mechanics } from '../mechanics/mechanics.js';
import { interpoleFace } from '../rotor/interpole-shape.js';
import { magnetFace } from '../rotor/magnet-shape.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import { copperMass } from '../winding/turn.js';
import { relative } from './error-bounds.js';
import type { MachineResult } from './result.js';

/** Pull of one disc towards the other over the magnets' radial length:  poles x sum(weight x pull), N. */
export function describePull(
  machine: Machine,
  slices: readonly SliceAnswer[],
): Pick<MachineResult['mechanical'], 'disc_pull_N' | 'disc_pull_N_rel_err'> {
  const { poles } = machine.rotor;
  let pull = 0;
  let bound = 0;
  for (const slice of slices) {
    pull += poles * slice.weight * slice.pull;
    bound += poles * Math.abs(slice.weight * slice.pull) * slice.pullRelErr;
  }
  return { disc_pull_N: pull, disc_pull_N_rel_err: relative(bound, pull) };
}

/**
 * Masses of the active parts: magnets of all magnet discs, bare copper, both steel discs (plain rings, holes and hubs
 * left out). What has no density in its material, or no steel, is left out.
 */
export function describeMasses(machine: Machine): MachineResult['masses'] {
  const { rotor, winding, materials } = machine;
  const magnets = sum([
    massOf(materials, rotor.magnets.material, magnetDiscs(rotor) * mainMagnetVolume(rotor)),
    rotor.interpoles && massOf(materials, rotor.interpoles.material, magnetDiscs(rotor) * interpoleVolume(rotor)),
  ]);
  const steel = sum([
    rotor.disc &&
      massOf(materials, rotor.disc.material, magnetDiscs(rotor) * (discVolume(rotor.disc) - cutAway(rotor))),
    rotor.keeper && massOf(materials, rotor.keeper.material, keeperVolume(rotor)),
  ]);
  return {
    ...(magnets !== undefined && { magnets_kg: magnets }),
    copper_kg: copperMass(winding, rotor.poles),
    ...(steel !== undefined && { steel_kg: steel }),
  };
}

const magnetDiscs = ({ arrangement }: Rotor): number => (arrangement === 'twin' ? 2 : 1);

/** Of all main magnets of one disc, m^3. */
const mainMagnetVolume = ({ magnets, poles }: Rotor): number => poles * magnetFace(magnets, poles) * magnets.thickness;

/** Of all interpoles of one disc, m^3, to whatever depth they reach. */
function interpoleVolume({ interpoles, magnets, poles }: Rotor): number {
  return interpoles === undefined ? 0 : poles * interpoleFace(interpoles, magnets, poles) * interpoles.depth;
}

/** What the interpoles take of one disc, m^3. */
function cutAway({ interpoles, magnets, poles }: Rotor): number {
  if (interpoles === undefined) return 0;
  return poles * interpoleFace(interpoles, magnets, poles) * Math.max(0, interpoles.depth - magnets.thickness);
}

/** A keeper has the disc's radii; opposite an ironless disc its radii are not known, NaN. */
function keeperVolume({ disc, keeper }: Rotor): number {
  return disc === undefined || keeper === undefined ? Number.NaN : discVolume({ ...disc, thickness: keeper.thickness });
}

function discVolume({ innerRadius, outerRadius, thickness }: Disc): number {
  return Math.PI * (outerRadius ** 2 - innerRadius ** 2) * thickness;
}

/** kg; null where volume or density is not known. */
function massOf(materials: Readonly<Record<string, LibraryMaterial>>, name: string, volume: number): number | null {
  const density = materials[name]?.density;
  return density === undefined || Number.isNaN(volume) ? null : volume * density;
}

/** Undefined where there is nothing (undefined) to add, or anything is not known (null). */
function sum(masses: readonly (number | null | undefined)[]): number | undefined {
  const there = masses.filter((mass) => mass !== undefined);
  if (there.length === 0 || there.includes(null)) return undefined;
  return there.reduce<number>((total, mass) => total + (mass ?? 0), 0);
}

/** Bending, clearance, retention and the pull on the way in, as the results name them. */
export function mapMechanics({
  discs,
  clearance,
  retention,
  jacking,
}: Mechanics): Partial<MachineResult['mechanical']> {
  const edges = discs.map(({ edge }) => edge);
  return {
    ...(edges.length > 0 && {
      disc_deflection_m: Math.max(...edges),
      disc_stress_Pa: Math.max(...discs.map(({ stress }) => stress)),
    }),
    ...(clearance !== undefined && Number.isFinite(clearance.left) && { clearance_left_m: clearance.left }),
    ...(retention !== undefined && { magnet_retention_N: retention.force, band_tension_N: retention.bandTension }),
    ...(jacking !== undefined && { jacking: jacking.map(({ gap, force }) => ({ gap_m: gap, pull_N: force })) }),
  };
}

/** `costs` of the results. */
export function describeTotal(
  { rotor }: Machine,
  prices: Prices,
  masses: MachineResult['masses'],
): NonNullable<MachineResult['costs']> {
  const parts = { magnets: masses.magnets_kg, copper: masses.copper_kg, steel: masses.steel_kg };
  const known = Object.fromEntries(Object.entries(parts).filter(([, mass]) => mass !== undefined));
  const steel = rotor.disc !== undefined || rotor.keeper !== undefined;
  const {
    currency,
    priced,
    total,
    parts: costs,
  } = describeCosts(prices, known, ['magnets', 'copper', ...(steel ? (['steel'] as const) : [])]);
  return { ...(total !== undefined && { total }), priced, currency, parts: costs };
}
