import type { LibraryMaterial } from '../machine.js';
import {
  coercivityAt,
  demagnetisationAt,
  energyProductAt,
  kneeAt,
  type Magnet,
  normalCoercivityAt,
  remanenceAt,
} from './at-temperature.js';
import { steelFigures } from './steel-figures.js';

/** Columns of a curve. */
export interface CurveColumns {
  readonly H_A_per_m: readonly number[];
  readonly B_T: readonly number[];
}

/** A magnet at one temperature. What is not known is left out. */
export interface MagnetAtResult {
  readonly temperature_C: number;
  readonly remanence_T: number;
  readonly coercivity_intrinsic_A_per_m?: number;
  /** Where B is 0. */
  readonly coercivity_A_per_m?: number;
  readonly energy_product_J_per_m3: number;
  readonly knee_H_A_per_m?: number;
  readonly knee_B_T?: number;
  readonly demagnetisation: CurveColumns;
}

interface CommonResult {
  readonly name: string;
  readonly density_kg_per_m3?: number;
  readonly source: string;
}

/** A material's figures in SI units, as `gapwright materials --json` prints them; the unit ends the key. */
export type MaterialResult =
  | (CommonResult & { readonly kind: 'nonmagnetic' })
  | (CommonResult & { readonly kind: 'steel'; readonly mu_r: number })
  | (CommonResult & {
      readonly kind: 'steel-curve';
      readonly mu_r_first: number;
      readonly mu_r_highest: number;
      readonly mu_r_highest_B_T: number;
      readonly last_H_A_per_m: number;
      readonly last_B_T: number;
      readonly last_polarisation_T: number;
    })
  | (CommonResult & {
      readonly kind: 'magnet';
      readonly remanence_T: number;
      /** Lowest and highest. */
      readonly remanence_range_T?: readonly [number, number];
      readonly recoil: number;
      readonly remanence_slope_per_K: number;
      readonly coercivity_intrinsic_A_per_m?: number;
      readonly coercivity_slope_per_K?: number;
      readonly energy_product_J_per_m3: number;
      readonly highest_temperature_C?: number;
    });

export function materialFigures(name: string, material: LibraryMaterial): MaterialResult {
  const { density, source } = material;
  const common = { source, ...(density === undefined ? {} : { density_kg_per_m3: density }) };
  switch (material.kind) {
    case 'nonmagnetic':
      return { name, kind: 'nonmagnetic', ...common };
    case 'steel':
      return { name, kind: 'steel', mu_r: material.muR, ...common };
    case 'steel-curve': {
      const figures = steelFigures(material.bh);
      return {
        name,
        kind: 'steel-curve',
        mu_r_first: figures.initialPermeability,
        mu_r_highest: figures.highestPermeability,
        mu_r_highest_B_T: figures.atFlux,
        last_H_A_per_m: figures.lastField,
        last_B_T: figures.lastFlux,
        last_polarisation_T: figures.lastPolarisation,
        ...common,
      };
    }
    case 'magnet': {
      const { remanenceRange, coercivityIntrinsic, coercivitySlope, highestTemperature } = material;
      return {
        name,
        kind: 'magnet',
        remanence_T: material.remanence,
        ...(remanenceRange === undefined ? {} : { remanence_range_T: remanenceRange }),
        recoil: material.recoil,
        remanence_slope_per_K: material.remanenceSlope,
        ...(coercivityIntrinsic === undefined ? {} : { coercivity_intrinsic_A_per_m: coercivityIntrinsic }),
        ...(coercivitySlope === undefined ? {} : { coercivity_slope_per_K: coercivitySlope }),
        energy_product_J_per_m3: energyProductAt(material, 20),
        ...(highestTemperature === undefined ? {} : { highest_temperature_C: highestTemperature }),
        ...common,
      };
    }
  }
}

/** A magnet at a temperature in degC. */
export function magnetFigures(magnet: Magnet, celsius: number): MagnetAtResult {
  const coercivity = coercivityAt(magnet, celsius);
  const normal = normalCoercivityAt(magnet, celsius);
  const knee = kneeAt(magnet, celsius);
  return {
    temperature_C: celsius,
    remanence_T: remanenceAt(magnet, celsius),
    ...(coercivity === undefined ? {} : { coercivity_intrinsic_A_per_m: coercivity }),
    ...(normal === undefined ? {} : { coercivity_A_per_m: normal }),
    energy_product_J_per_m3: energyProductAt(magnet, celsius),
    ...(knee === undefined ? {} : { knee_H_A_per_m: knee.h, knee_B_T: knee.b }),
    demagnetisation: curveColumns(demagnetisationAt(magnet, celsius)),
  };
}

export const curveColumns = (rows: readonly (readonly [H: number, B: number])[]): CurveColumns => ({
  H_A_per_m: rows.map(([h]) => h),
  B_T: rows.map(([, b]) => b),
});
