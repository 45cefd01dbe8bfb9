import type { Machine, Winding } from '../../packages/machine-models/src/machine.js';
import { magnetWidth } from '../../packages/machine-models/src/rotor/magnet-shape.js';
import type { SliceAnswer } from '../../packages/machine-models/src/slices/slice-answer.js';

export const MU0 = 4e-7 * Math.PI;

export type Concentrated = Extract<Winding, { layout: 'concentrated' }>;
export type Overlapped = Extract<Winding, { layout: 'overlapped' }>;

export function relativeError(got: number, expected: number): number {
  return Math.abs(got / expected - 1);
}

const MATERIALS: Machine['materials'] = {
  plate: { kind: 'steel', muR: 2000, density: 7850, source: 'invented' },
  magnet_42: {
    kind: 'magnet',
    remanence: 1.3,
    recoil: 1.05,
    remanenceSlope: -0.0012,
    coercivityIntrinsic: 955e3,
    coercivitySlope: -0.006,
    density: 7500,
    source: 'invented',
  },
};

/** The hut hydro set, SI, three slices with Simpson weights over the magnets' 55 mm. */
export function hutHydro(): Machine & { readonly winding: Concentrated } {
  return {
    name: 'Hut hydro, 106 V link',
    materials: MATERIALS,
    rotor: {
      poles: 16,
      arrangement: 'twin',
      gap: 0.019,
      disc: { material: 'plate', thickness: 0.01, innerRadius: 0.09, outerRadius: 0.165, clampRadius: 0.06 },
      magnets: {
        shape: 'block',
        width: 0.028,
        length: 0.055,
        thickness: 0.012,
        meanRadius: 0.128,
        material: 'magnet_42',
        temperature: 20,
      },
      keeper: undefined,
      interpoles: undefined,
    },
    winding: {
      phases: 3,
      layout: 'concentrated',
      coils: 12,
      turns: 58,
      legWidth: 0.0205,
      legShape: 'parallel',
      opening: { innerRadius: 0.1045, outerRadius: 0.1515, innerWidth: 0.012, outerWidth: 0.03 },
      thickness: 0.015,
      clearance: 0.002,
      wire: { strandArea: (Math.PI / 4) * 0.00118 ** 2, strands: 2, diameter: 0.00118, enamel: 'grade 2' },
      connection: 'star',
      paths: 1,
      temperature: 90,
    },
    operation: { speedRpm: 420, overspeedRpm: 756, ambient: 15, cold: -10, cableResistance: 0 },
    limits: {},
    model: { slices: simpson(0.128, 0.055), auto: false, accuracy: 0.002, endCorrection: false },
  };
}

/** Hut hydro's rotor with one leg per pole and phase, coils one pole pitch wide. */
export function overlappedHydro(): Machine & { readonly winding: Overlapped } {
  const machine = hutHydro();
  const { opening: _opening, ...common } = machine.winding;
  return {
    ...machine,
    winding: {
      ...common,
      layout: 'overlapped',
      coils: 24,
      turns: 20,
      legWidth: 0.013,
      legs: { innerRadius: 0.1005, outerRadius: 0.1555 },
    },
  };
}

/** Inner, mean and outer radius with Simpson's weights over the length. */
export function simpson(meanRadius: number, length: number): Machine['model']['slices'] {
  return [
    { radius: meanRadius - length / 2, weight: length / 6 },
    { radius: meanRadius, weight: (4 * length) / 6 },
    { radius: meanRadius + length / 2, weight: length / 6 },
  ];
}

/** Machine with parts of its winding replaced. */
export function withWinding<W extends Winding>(
  machine: Machine & { readonly winding: W },
  parts: Partial<W>,
): Machine & { readonly winding: W } {
  return { ...machine, winding: { ...machine.winding, ...parts } };
}

/**
 * Slices of a twin-disc machine with infinitely permeable discs and the recoil permeability between the magnets too:
 *
 *   By_n(y) = R_n cosh(k y) / (cosh(k g/2) + m sinh(k g/2) coth(k h)),  k = n pi/tau,  R_n = (4 Br/(n pi)) sin(n pi w/(2 tau))
 *
 * averaged over the winding thickness t by sinh(k t/2)/(k t/2). Scalar potential in layers, derived in the project's
 * check values (B1, confirmed there by finite elements). No mesh, so the bounds are what the test says.
 */
export function closedFormSlices(machine: Machine, bounds: readonly number[] = []): readonly SliceAnswer[] {
  const { rotor, winding, materials, model } = machine;
  const { magnets } = rotor;
  const material = materials[magnets.material];
  if (material?.kind !== 'magnet') throw new Error('not a magnet');
  const remanence = material.remanence * (1 + material.remanenceSlope * (magnets.temperature - 20));
  const order = Array.from({ length: 50 }, (_, i) => 2 * i + 1);
  return model.slices.map(({ radius, weight }) => {
    const polePitch = (2 * Math.PI * radius) / rotor.poles;
    const width = magnetWidth(magnets, rotor.poles, radius);
    const mid = order.map((n) => {
      const k = (n * Math.PI) / polePitch;
      const source = ((4 * remanence) / (n * Math.PI)) * Math.sin((k * width) / 2);
      const half = (k * rotor.gap) / 2;
      return source / (Math.cosh(half) + (material.recoil * Math.sinh(half)) / Math.tanh(k * magnets.thickness));
    });
    const overThickness = order.map((n) => {
      const x = (n * Math.PI * winding.thickness) / (2 * polePitch);
      return Math.sinh(x) / x;
    });
    return {
      radius,
      polePitch,
      weight,
      midB: { order: order.slice(0, 6), amplitude: mid.slice(0, 6) },
      windingB: { order, amplitude: mid.map((value, i) => value * overThickness[i]) },
      windingBErr: bounds,
      pull: (polePitch * mid.reduce((sum, value) => sum + value * value, 0)) / (4 * MU0),
      pullRelErr: 0,
      energy: 0,
      energyRelErr: 0,
      discB: undefined,
      peakSteelB: undefined,
      mesh: { nodes: 0, triangles: 0, minAngleDeg: 0 },
      newtonSteps: 1,
      newtonStepsTotal: 1,
      meshes: 1,
      converged: true,
      residuals: [1, 0],
      accurate: true,
    };
  });
}
