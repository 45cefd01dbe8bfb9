import type { GapModel } from '../../../packages/machine-models/src/end-effect/gap-model.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { type Concentrated, hutHydro } from '../../helpers/machines.js';

type Rotor = Machine['rotor'];
type Made = Machine & { readonly winding: Concentrated };

export function withRotor<M extends Machine>(machine: M, parts: Partial<Rotor>): M {
  return { ...machine, rotor: { ...machine.rotor, ...parts } };
}

const WIDE = { material: 'plate', thickness: 0.01, innerRadius: 0.085, outerRadius: 0.145 };
const KEEPER = { material: 'plate', thickness: 0.01 };
const COMMON = { material: 'magnet_42', temperature: 20 };

/** Eight round magnets a disc, two steel discs. */
export function roundMachine(): Made {
  const machine = hutHydro();
  return {
    ...machine,
    rotor: {
      ...machine.rotor,
      poles: 8,
      gap: 0.014,
      disc: { material: 'plate', thickness: 0.006, innerRadius: 0.03, outerRadius: 0.074 },
      magnets: { ...COMMON, shape: 'round', diameter: 0.03, thickness: 0.008, meanRadius: 0.052 },
    },
    winding: {
      ...machine.winding,
      coils: 6,
      legWidth: 0.014,
      thickness: 0.011,
      opening: { innerRadius: 0.04, outerRadius: 0.064, innerWidth: 0.01, outerWidth: 0.026 },
    },
  };
}

/** Ten sectors a disc, two steel discs. */
export function sectorMachine(): Made {
  const machine = hutHydro();
  return {
    ...machine,
    rotor: {
      ...machine.rotor,
      poles: 10,
      gap: 0.014,
      disc: { material: 'plate', thickness: 0.012, innerRadius: 0.05, outerRadius: 0.105 },
      magnets: {
        ...COMMON,
        shape: 'sector',
        arc: 0.76,
        segments: 1,
        length: 0.035,
        thickness: 0.01,
        meanRadius: 0.0775,
      },
    },
    winding: {
      ...machine.winding,
      legWidth: 0.0125,
      thickness: 0.011,
      opening: { innerRadius: 0.062, outerRadius: 0.093, innerWidth: 0.006, outerWidth: 0.022 },
    },
  };
}

/** Twenty poles of cut Halbach arrays facing each other, no steel. */
export function halbachMachine(segments = 2): Made {
  const machine = hutHydro();
  return {
    ...machine,
    rotor: {
      ...machine.rotor,
      poles: 20,
      gap: 0.015,
      disc: undefined,
      magnets: { ...COMMON, shape: 'sector', arc: 1, segments, length: 0.032, thickness: 0.012, meanRadius: 0.116 },
    },
    winding: {
      ...machine.winding,
      coils: 15,
      legWidth: 0.0155,
      thickness: 0.012,
      opening: { innerRadius: 0.103, outerRadius: 0.129, innerWidth: 0.01, outerWidth: 0.02 },
    },
  };
}

/** Hut hydro's magnets on one disc, a plain one opposite. */
export function keeperMachine(): Made {
  const machine = withRotor(hutHydro(), { arrangement: 'keeper', gap: 0.012, keeper: KEEPER });
  return { ...machine, winding: { ...machine.winding, thickness: 0.009 } };
}

/** Hut hydro with all the room between its magnets filled. */
export function interpoleMachine(depth = 0.012, through = false): Made {
  return withRotor(hutHydro(), { interpoles: { width: 'fill', depth, through, material: 'magnet_42' } });
}

export const KINDS: readonly (readonly [string, () => Made])[] = [
  ['blocks, two discs', hutHydro],
  ['round magnets, two discs', roundMachine],
  ['sectors, two discs', sectorMachine],
  ['blocks and a keeper', keeperMachine],
  ['interpoles', interpoleMachine],
  ['Halbach arrays, no steel', halbachMachine],
  ['Halbach arrays of three pieces on steel', () => withRotor(halbachMachine(3), { disc: WIDE })],
];

/** The model with the field read near one height in place of over the winding. */
export function readAt(model: GapModel, y: number): GapModel {
  return { ...model, windingFrom: y - 1e-5, windingTo: y + 1e-5 };
}
