import { MU0 } from '../base/constants.js';
import type { Region } from '../geometry/section.js';
import { buildDemagnetisationCurve } from '../materials/demagnetisation.js';
import type { Material } from '../materials/material.js';
import { AIR, mm, rectangularSection } from './drawing.js';
import { fieldStrengthAt, lawCurve } from './laws.js';
import { meanOf } from './readings.js';
import type { Figure, VerificationCase } from './verification-case.js';

const CIRCUIT = "Ampere's law round a one-dimensional circuit; computed here";
const WIDTH = 0.01;

/** One layer of a circuit, all of the strip's width. */
export interface Layer {
  readonly name: string;
  readonly thickness: number;
  readonly material: Material;
}

/**
 * Layers in series along y, the flux parallel to the sides. The field crosses bottom and top at right angles (H along
 * them is 0, as on ideal iron). The left side holds A = 0. On the right a thin layer that flux does not enter keeps A one
 * constant along the side, without fixing which: it settles where the sum of H times thickness over the layers is 0.
 * Figures are the mean By of layers.
 */
export function seriesCircuit(
  name: string,
  formula: string,
  layers: readonly Layer[],
  figures: readonly (Omit<Figure, 'read'> & { readonly layer: string })[],
): VerificationCase {
  const height = layers.reduce((sum, { thickness }) => sum + thickness, 0);
  let y = 0;
  const regions = layers.map((layer): Region => {
    const from = y;
    y += layer.thickness;
    return { name: layer.name, shape: { kind: 'rectangle', from: [0, from], to: [WIDTH, y] } };
  });
  const materials = Object.fromEntries(layers.map((layer) => [layer.name, layer.material]));
  const natural = { kind: 'crossing' } as const;
  return {
    name,
    formula,
    source: CIRCUIT,
    section: rectangularSection([0, 0], [1.1 * WIDTH, height], 'barrier', regions),
    setup: {
      materials: { ...materials, barrier: { kind: 'linear', muR: BARRIER } },
      edges: { left: { kind: 'closed' }, right: natural, top: natural, bottom: natural },
    },
    probes: layers.map((layer) => ({ kind: 'mean', name: layer.name, over: [layer.name] })),
    accuracy: 1e-3,
    figures: figures.map(({ layer, ...figure }) => ({ ...figure, slack: LEAK, read: meanOf(layer, 'by') })),
  };
}

/** Permeability of the layer that flux does not enter, and the share of the flux that does all the same. */
const BARRIER = 1e-6;
const LEAK = 4e-5;

const magnetOf = (remanence: number, recoil: number): Material => ({
  kind: 'magnet',
  recoil,
  remanence: [0, remanence],
});

/** B = Br h/(h + m (g + l/mu_iron)): all magnet in series, all air in series, iron of constant permeability. */
export const circuitFluxDensity = (
  remanence: number,
  recoil: number,
  magnet: number,
  gap: number,
  iron = 0,
  muR = 1,
): number => (remanence * magnet) / (magnet + recoil * (gap + iron / muR));

export function magnetAndGap(remanence: number, recoil: number, magnet: number, gap: number): VerificationCase {
  return seriesCircuit(
    `circuit of ${mm(magnet)} mm magnet, ${mm(gap)} mm gap`,
    'B = Br h/(h + m g)',
    [
      { name: 'magnet', thickness: magnet, material: magnetOf(remanence, recoil) },
      { name: 'gap', thickness: gap, material: AIR },
    ],
    [{ quantity: 'B, T', expected: circuitFluxDensity(remanence, recoil, magnet, gap), layer: 'gap' }],
  );
}

export function magnetGapAndIron(): VerificationCase {
  const [remanence, recoil, magnet, gap, iron, muR] = [1.25, 1.05, 0.02, 0.016, 0.2, 1000];
  return seriesCircuit(
    `circuit with iron of mu_r ${muR}`,
    'B = Br h/(h + m (g + l/mu_r))',
    [
      { name: 'magnet', thickness: magnet, material: magnetOf(remanence, recoil) },
      { name: 'gap', thickness: gap, material: AIR },
      { name: 'iron', thickness: iron, material: { kind: 'linear', muR } },
    ],
    [{ quantity: 'B, T', expected: circuitFluxDensity(remanence, recoil, magnet, gap, iron, muR), layer: 'gap' }],
  );
}

/** B of the circuit with steel of any law: root of B (h/m + g)/mu0 + H(B) l = Br h/(mu0 m), by halving. */
export function steelCircuitFluxDensity(
  remanence: number,
  recoil: number,
  magnet: number,
  gap: number,
  length: number,
  strength: (b: number) => number,
): number {
  let [low, high] = [0, remanence];
  for (let i = 0; i < 60; i++) {
    const b = (low + high) / 2;
    const drop = (b * (magnet / recoil + gap)) / MU0 + strength(b) * length;
    if (drop < (remanence * magnet) / (MU0 * recoil)) low = b;
    else high = b;
  }
  return low;
}

export function magnetGapAndSteel(): VerificationCase {
  const [remanence, recoil, magnet, gap, length] = [1.25, 1.05, 0.02, 0.004, 0.2];
  return seriesCircuit(
    'circuit with saturable steel',
    'B (h/m + g)/mu0 + H(B) l = Br h/(mu0 m), B = mu0 H + Js H/(H + h)',
    [
      { name: 'magnet', thickness: magnet, material: magnetOf(remanence, recoil) },
      { name: 'gap', thickness: gap, material: AIR },
      { name: 'steel', thickness: length, material: { kind: 'curve', curve: lawCurve() } },
    ],
    [
      {
        quantity: 'B, T',
        expected: steelCircuitFluxDensity(remanence, recoil, magnet, gap, length, fieldStrengthAt),
        layer: 'gap',
      },
    ],
  );
}

/** A magnet driven past its knee by a long gap: its line B = Bk + s (H - Hk) meets the load line B = -mu0 H h/g. */
export function magnetPastItsKnee(): VerificationCase {
  const [remanence, recoil, magnet, gap] = [1.25, 1.05, 0.01, 0.03];
  const knee = { h: -6e5, b: remanence - recoil * MU0 * 6e5 };
  const end = { h: -7e5, b: 0 };
  const slope = (knee.b - end.b) / (knee.h - end.h);
  const strength = (slope * knee.h - knee.b) / (slope + (MU0 * magnet) / gap);
  const curve = buildDemagnetisationCurve([
    [0, remanence],
    [knee.h, knee.b],
    [end.h, end.b],
  ]);
  return seriesCircuit(
    'circuit of a magnet past its knee',
    'Bk + s (H - Hk) = -mu0 H h/g',
    [
      {
        name: 'magnet',
        thickness: magnet,
        material: { kind: 'directed-magnet', direction: { angle: Math.PI / 2 }, recoil, along: curve },
      },
      { name: 'gap', thickness: gap, material: AIR },
    ],
    [{ quantity: 'B, T', expected: (-MU0 * strength * magnet) / gap, layer: 'gap' }],
  );
}
