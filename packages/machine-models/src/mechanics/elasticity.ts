import type { LibraryMaterial } from '../machine.js';

/** How a material bends and what it bears. */
export interface Elasticity {
  /** Young's modulus, Pa. */
  readonly young: number;
  readonly poisson: number;
  /** Where it begins to yield, or, where it is brittle, breaks in tension, Pa: a low value of what is sold. */
  readonly strength: number;
  readonly source: string;
}

const typical = (what: string): string => `typical of ${what}, from memory`;

const STEEL: Elasticity = { young: 200e9, poisson: 0.3, strength: 200e6, source: typical('low-carbon steel') };

/** By the name of the material, where it tells more than its kind. */
const BY_NAME: Readonly<Record<string, Elasticity>> = {
  'cast iron': {
    young: 100e9,
    poisson: 0.26,
    strength: 150e6,
    source: typical('grey cast iron, 66 to 150 GPa by grade'),
  },
  'stainless steel': { young: 193e9, poisson: 0.3, strength: 200e6, source: typical('austenitic stainless steel') },
  aluminium: {
    young: 70e9,
    poisson: 0.33,
    strength: 100e6,
    source: typical('wrought aluminium, strength by alloy 35 to 400 MPa'),
  },
  copper: { young: 120e9, poisson: 0.34, strength: 60e6, source: typical('annealed copper') },
};

/**
 * Elasticity of a disc's material: by its name where that is known, else of low-carbon steel for what is magnetically a
 * steel. Undefined for others: a machine file tells nothing of their stiffness.
 */
export function elasticityOf(name: string, material: LibraryMaterial | undefined): Elasticity | undefined {
  if (Object.hasOwn(BY_NAME, name)) return BY_NAME[name];
  return material?.kind === 'steel' || material?.kind === 'steel-curve' ? STEEL : undefined;
}
