import { MU0 } from '../base/constants.js';
import type { Material } from '../materials/material.js';
import { POINT } from './conductors.js';
import { AIR, rectangularSection } from './drawing.js';
import { cosineOf, fluxOf, forceOf, pointOf, scaled } from './readings.js';
import type { Figure, VerificationCase } from './verification-case.js';

/**
 * Slotless gap between two infinitely permeable discs, unrolled; lengths in metres. `halfGap` is the distance from the
 * magnets' face to the plane of zero scalar potential: half the gap where both discs carry magnets, the whole gap where
 * the other disc is plain steel.
 */
export interface DiscGap {
  readonly polePitch: number;
  readonly width: number;
  readonly height: number;
  readonly halfGap: number;
  /** T. */
  readonly remanence: number;
  readonly recoil: number;
}

/** The three twin-disc gaps and the single-disc one whose figures are tabled; lengths in millimetres. */
const gap = (tau: number, w: number, h: number, a: number, remanence: number, recoil: number): DiscGap => ({
  polePitch: tau / 1000,
  width: w / 1000,
  height: h / 1000,
  halfGap: a / 1000,
  remanence,
  recoil,
});
export const G1 = gap(50, 36, 10, 8, 1.25, 1.05);
export const G2 = gap(30, 20, 6, 5, 1.32, 1.05);
export const G3 = gap(80, 46, 20, 7, 0.39, 1.1);
export const G4 = gap(50, 36, 10, 9, 1.25, 1.05);

/**
 * Amplitude of the odd harmonic n of By at the height y from the plane of zero potential. The magnetisation's wave is
 * R_n = (4 Br/(n pi)) sin(n pi w/(2 tau)); the scalar potential, ~ sinh(k s) from the disc in the magnet layer and
 * ~ sinh(k y) in the gap, obeys Laplace's equation in both, and equal potential and normal B at the magnets' face give
 *
 *   B_n(y) = R_n cosh(k y) / (cosh(k a) + m sinh(k a) coth(k h)),   k = n pi/tau,
 *
 * the recoil permeability m filling the magnet layer between the magnets too.
 */
export function seriesAmplitude(g: DiscGap, n: number, y: number): number {
  const k = (n * Math.PI) / g.polePitch;
  const source = ((4 * g.remanence) / (n * Math.PI)) * Math.sin((k * g.width) / 2);
  // cosh and sinh over cosh(k a), which overflow for high orders
  const share = (Math.exp(k * (y - g.halfGap)) + Math.exp(-k * (y + g.halfGap))) / (1 + Math.exp(-2 * k * g.halfGap));
  return (source * share) / (1 + (g.recoil * Math.tanh(k * g.halfGap)) / Math.tanh(k * g.height));
}

/**
 * The same in the magnet layer, at the distance s from the disc:
 * B_n = R_n (1 - m cosh(k s)/(m cosh(k h) + sinh(k h) coth(k a))).
 */
export function seriesAmplitudeInMagnet(g: DiscGap, n: number, s: number): number {
  const k = (n * Math.PI) / g.polePitch;
  const source = ((4 * g.remanence) / (n * Math.PI)) * Math.sin((k * g.width) / 2);
  const share = (Math.exp(k * (s - g.height)) + Math.exp(-k * (s + g.height))) / (1 + Math.exp(-2 * k * g.height));
  return source * (1 - (g.recoil * share) / (g.recoil + Math.tanh(k * g.height) / Math.tanh(k * g.halfGap)));
}

const ORDERS = Array.from({ length: 400 }, (_, i) => 2 * i + 1);

/** By on the magnets' axis at height y, T. */
export const seriesField = (g: DiscGap, y: number): number =>
  ORDERS.reduce((sum, n) => sum + seriesAmplitude(g, n, y), 0);

/** Flux of one pole through the plane at height y, in the gap or in the magnets, Wb per metre of depth. */
export function seriesFlux(g: DiscGap, y: number): number {
  const top = g.halfGap + g.height;
  const amplitude = (n: number): number =>
    y <= g.halfGap ? seriesAmplitude(g, n, y) : seriesAmplitudeInMagnet(g, n, top - y);
  return ORDERS.reduce(
    (sum, n) => sum + ((2 * g.polePitch) / (n * Math.PI)) * amplitude(n) * (n % 4 === 1 ? 1 : -1),
    0,
  );
}

/** Pull of one pole, N per metre of depth: tau sum B_n^2/(4 mu0) on the plane of zero potential. */
export function seriesPull(g: DiscGap): number {
  return ORDERS.reduce((sum, n) => sum + (g.polePitch * seriesAmplitude(g, n, 0) ** 2) / (4 * MU0), 0);
}

const FORMULA =
  'B_n = R_n cosh(k y)/(cosh(k a) + m sinh(k a) coth(k h)), R_n = (4 Br/(n pi)) sin(n pi w/(2 tau)), k = n pi/tau';
const SOURCE =
  'scalar potential in layers, computed here and checked to 3e-5 by bilinear elements; the approach of Bumby et al., IEE Proc. Electr. Power Appl., 2004 (title from memory)';

/**
 * Half a pole from the magnet's axis to midway between poles, from the plane of zero potential to the disc; the natural
 * condition on the disc's face stands for infinite permeability.
 */
export function discGap(label: string, g: DiscGap): VerificationCase {
  const [half, top] = [g.polePitch / 2, g.halfGap + g.height];
  const magnet: Material = { kind: 'magnet', recoil: g.recoil, remanence: [0, g.remanence] };
  const fundamental = seriesAmplitude(g, 1, 0);
  const harmonics = [1, 3, 5].map(
    (n): Figure => ({
      quantity: `B_${n} at y = 0, T`,
      expected: seriesAmplitude(g, n, 0),
      scale: fundamental,
      read: cosineOf('middle', (n * Math.PI) / g.polePitch),
      bound: 5e-4,
    }),
  );
  const flux = (name: string, height: number): Figure => ({
    quantity: `flux per pole, ${name}, Wb/m`,
    expected: seriesFlux(g, height),
    read: scaled(fluxOf(name), 2),
  });
  return {
    name: `disc machine ${label}`,
    formula: FORMULA,
    source: SOURCE,
    section: rectangularSection([0, 0], [half, top], 'between', [
      { name: 'gap', shape: { kind: 'rectangle', from: [0, 0], to: [half, g.halfGap] } },
      { name: 'magnet', shape: { kind: 'rectangle', from: [0, g.halfGap], to: [g.width / 2, top] } },
    ]),
    setup: {
      materials: { gap: AIR, magnet, between: { kind: 'linear', muR: g.recoil } },
      edges: {
        left: { kind: 'closed' },
        right: { kind: 'crossing' },
        bottom: { kind: 'crossing' },
        top: { kind: 'crossing' },
      },
    },
    probes: [
      { kind: 'line', name: 'middle', from: [0, 0], to: [half, 0], points: 49 },
      { kind: 'flux', name: 'y = 0', from: [0, 0], to: [half, 0] },
      { kind: 'flux', name: 'magnet face', from: [0, g.halfGap], to: [half, g.halfGap] },
      { kind: 'flux', name: 'disc', from: [0, top], to: [half, top] },
      { kind: 'point', name: 'axis', at: [0, 0] },
    ],
    accuracy: 5e-5,
    figures: [
      ...harmonics,
      {
        quantity: 'By on the axis at y = 0, T',
        expected: seriesField(g, 0),
        read: pointOf('axis', 'by'),
        bound: POINT,
      },
      flux('y = 0', 0),
      flux('magnet face', g.halfGap),
      flux('disc', top),
    ],
  };
}

/** Permeability of steel that stands for an ideal one: the field in it is less than 1e-5 of that in the gap. */
const PERMEABLE = 1e6;

/** A whole pole facing a plain disc that is drawn, with air behind it: the pull on that disc. */
export function pullOnDisc(label: string, g: DiscGap): VerificationCase {
  const half = g.polePitch / 2;
  const [face, back] = [-g.halfGap, -g.halfGap - g.polePitch / 5];
  const top = g.height;
  const magnet: Material = { kind: 'magnet', recoil: g.recoil, remanence: [0, g.remanence] };
  return {
    name: `pull on a plain disc, ${label}`,
    formula: 'F = tau sum B_n^2/(4 mu0) at the face of the plain disc',
    source: SOURCE,
    section: {
      ...rectangularSection([-half, back - g.polePitch / 5], [half, top], 'air', [
        { name: 'plain disc', shape: { kind: 'rectangle', from: [-half, back], to: [half, face] } },
        { name: 'between', shape: { kind: 'rectangle', from: [-half, 0], to: [half, top] } },
        { name: 'magnet', shape: { kind: 'rectangle', from: [-g.width / 2, 0], to: [g.width / 2, top] } },
      ]),
      matched: [['left', 'right']],
    },
    setup: {
      materials: {
        air: AIR,
        magnet,
        between: { kind: 'linear', muR: g.recoil },
        'plain disc': { kind: 'linear', muR: PERMEABLE },
      },
      edges: {
        left: { kind: 'reversing' },
        right: { kind: 'reversing' },
        bottom: { kind: 'closed' },
        top: { kind: 'crossing' },
      },
    },
    probes: [{ kind: 'force', name: 'plain disc', on: ['plain disc'] }],
    accuracy: 1e-3,
    figures: [{ quantity: 'pull per pole, N/m', expected: seriesPull(g), read: forceOf('plain disc', 'fy') }],
  };
}
