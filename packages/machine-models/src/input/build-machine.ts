import type { Disc, Interpoles, LibraryMaterial, Machine, Magnets, Winding } from '../machine.js';
import type { SliceRadius } from '../rotor/slice-radii.js';
import { buildLimits, buildMeasured, buildOperation, buildPrices } from './build-operation.js';
import { radiiOf } from './choose-slices.js';
import { HAIR } from './format-figure.js';
import type { MachineFile } from './schema.js';
import type { RotorFile } from './schema-rotor.js';

/** What the checks have worked out on the way. */
export interface Resolved {
  readonly materials: Readonly<Record<string, LibraryMaterial>>;
  readonly winding: Winding;
  readonly slices: readonly SliceRadius[];
}

/** The machine of a file in which every check has found nothing wrong. */
export function buildMachine(file: MachineFile, resolved: Resolved): Machine {
  const { rotor, model } = file;
  const [prices, measured] = [buildPrices(file), buildMeasured(file)];
  return {
    name: file.name,
    materials: resolved.materials,
    rotor: {
      poles: rotor.poles,
      arrangement: rotor.arrangement,
      gap: rotor.gap,
      disc: buildDisc(rotor.disc),
      keeper: buildKeeper(rotor),
      magnets: buildMagnets(rotor.magnets),
      interpoles: buildInterpoles(rotor),
    },
    winding: resolved.winding,
    operation: buildOperation(file.operation),
    limits: buildLimits(file),
    ...(prices !== undefined && { prices }),
    ...(measured !== undefined && { measured }),
    model: {
      slices: resolved.slices,
      auto: radiiOf(model, rotor.magnets) === 'auto',
      accuracy: model.accuracy,
      endCorrection: model.end_correction === 'on',
    },
  };
}

/** The magnets in SI units; what could not be read is NaN. */
export function buildMagnets(magnets: RotorFile['magnets']): Magnets {
  const { material, thickness, mean_radius: meanRadius, temperature } = magnets;
  const common = { material, thickness, meanRadius, temperature };
  switch (magnets.shape) {
    case 'block':
      return { shape: 'block', ...common, width: magnets.width, length: magnets.length };
    case 'round':
      return { shape: 'round', ...common, diameter: magnets.diameter };
    case 'sector': {
      // The checks see to it that plain sectors have an arc; a Halbach array fills the pole pitch.
      const arc = magnets.segments > 1 ? 1 : (magnets.arc ?? 1);
      return { shape: 'sector', ...common, arc, length: magnets.length, segments: magnets.segments };
    }
  }
}

/** The keeper is as the disc where nothing else is said. */
function buildKeeper({ arrangement, keeper, disc }: RotorFile): Machine['rotor']['keeper'] {
  if (arrangement !== 'keeper') return undefined;
  return { material: keeper?.material ?? disc.material, thickness: keeper?.thickness ?? disc.thickness ?? Number.NaN };
}

function buildInterpoles({ interpoles, magnets, disc }: RotorFile): Interpoles | undefined {
  if (interpoles === undefined) return undefined;
  const { width, depth, material } = interpoles;
  const whole = magnets.thickness + (disc.thickness ?? 0);
  const reach = depth === 'through' ? whole : depth;
  return { width, depth: reach, through: disc.material !== 'none' && reach >= whole - HAIR, material };
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
