import type { Disc, LibraryMaterial, Machine, Magnets, Operation, Winding } from '../machine.js';
import type { SliceRadius } from './radii.js';
import type { MachineFile } from './schema.js';
import type { RotorFile, SolvedMagnets } from './schema-rotor.js';

/** What the checks have worked out on the way. */
export interface Resolved {
  readonly materials: Readonly<Record<string, LibraryMaterial>>;
  readonly winding: Winding;
  readonly slices: readonly SliceRadius[];
}

/** The machine of a file in which every check has found nothing wrong. */
export function buildMachine(file: MachineFile, magnets: SolvedMagnets, resolved: Resolved): Machine {
  const { rotor, model } = file;
  return {
    name: file.name,
    materials: resolved.materials,
    rotor: {
      poles: rotor.poles,
      arrangement: rotor.arrangement,
      gap: rotor.gap,
      disc: buildDisc(rotor.disc),
      magnets: buildMagnets(magnets),
    },
    winding: resolved.winding,
    operation: buildOperation(file.operation),
    model: { slices: resolved.slices, accuracy: model.accuracy, endCorrection: model.end_correction === 'on' },
  };
}

function buildMagnets(magnets: SolvedMagnets): Magnets {
  const { material, thickness, mean_radius: meanRadius, temperature, length } = magnets;
  const common = { material, thickness, meanRadius, temperature, length };
  // The checks see to it that plain sectors have an arc.
  return magnets.shape === 'block'
    ? { shape: 'block', ...common, width: magnets.width }
    : { shape: 'sector', ...common, arc: magnets.arc ?? 1 };
}

function buildDisc(disc: RotorFile['disc']): Disc | undefined {
  const { material, thickness, inner_radius, outer_radius, clamp_radius } = disc;
  if (thickness === undefined || inner_radius === undefined || outer_radius === undefined) return undefined;
  return {
    material,
    thickness,
    innerRadius: inner_radius,
    outerRadius: outer_radius,
    ...(clamp_radius === undefined ? {} : { clampRadius: clamp_radius }),
  };
}

function buildOperation({ speed, overspeed, ambient, cold }: MachineFile['operation']): Operation {
  return {
    speedRpm: speed,
    ...(overspeed === undefined ? {} : { overspeedRpm: overspeed }),
    ambient,
    ...(cold === undefined ? {} : { cold }),
  };
}
