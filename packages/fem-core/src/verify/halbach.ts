import type { Section } from '../geometry/section.js';
import type { Material } from '../materials/material.js';
import { AIR, box, rectangularSection } from './drawing.js';
import type { Reading } from './readings.js';
import { amplitudeOf, cosineOf, sineOf } from './readings.js';
import type { Figure, VerificationCase } from './verification-case.js';

const SOURCE =
  'Mallinson, IEEE Trans. Magn. 9, 1973; Halbach, Nucl. Instrum. Methods 169, 1980 (titles from memory); numbers computed here';

/** A straight array: wavelength, thickness (m), remanence (T). */
interface HalbachArray {
  readonly wave: number;
  readonly thickness: number;
  readonly remanence: number;
}

export const ARRAY: HalbachArray = { wave: 0.08, thickness: 0.02, remanence: 1.2 };
/** Where By is read: this far off either face, m. */
const OFF = 0.005;

/** Amplitude of harmonic n of By at the distance y from the face, for magnetisation that turns evenly, times a share. */
export function halbachAmplitude({ wave, thickness, remanence }: HalbachArray, n: number, y: number): number {
  const k = (2 * Math.PI * n) / wave;
  return remanence * (1 - Math.exp(-k * thickness)) * Math.exp(-k * y);
}

/** Share of harmonic n that M blocks a wave leave: sin(n pi/M)/(n pi/M). */
export const segmentShare = (n: number, blocks: number): number =>
  Math.abs(Math.sin((n * Math.PI) / blocks)) / ((n * Math.PI) / blocks);

/** One array along x about y = 0, its strong side above, between closed sides 1.5 waves off. */
function arraySection(length: number, regions: Section['regions']): Section {
  const far = 1.5 * ARRAY.wave;
  return { ...rectangularSection([0, -far], [length, far], 'air', regions), matched: [['left', 'right']] };
}

const lineProbes = (length: number, points: number): VerificationCase['probes'] =>
  ([1, -1] as const).map((side) => {
    const y = side * (ARRAY.thickness / 2 + OFF);
    return { kind: 'line', name: side === 1 ? 'above' : 'below', from: [0, y], to: [length, y], points };
  });

const harmonic = (line: string, n: number): Reading => {
  const k = (2 * Math.PI * n) / ARRAY.wave;
  return amplitudeOf(cosineOf(line, k), sineOf(line, k));
};

/** Half a wave of evenly turning magnetisation, the rest its negative. */
export function turningHalbach(): VerificationCase {
  const { wave, thickness, remanence } = ARRAY;
  const expected = halbachAmplitude(ARRAY, 1, OFF);
  const magnet: Material = {
    kind: 'directed-magnet',
    direction: { angle: 0, gradient: [(2 * Math.PI) / wave, 0] },
    recoil: 1,
    along: remanence,
  };
  return {
    name: 'Halbach array, evenly turning',
    formula: '|B| = Br (1 - exp(-k d)) exp(-k y) on the strong side, none on the weak one',
    source: SOURCE,
    section: arraySection(wave / 2, [box('array', [wave / 4, 0], wave / 2, thickness)]),
    setup: {
      materials: { array: magnet, air: AIR },
      edges: { left: { kind: 'reversing' }, right: { kind: 'reversing' } },
    },
    probes: lineProbes(wave / 2, 49),
    accuracy: 2e-4,
    figures: [
      { quantity: 'B_1 5 mm above, T', expected, read: harmonic('above', 1), bound: WAVE, slack: FAR },
      {
        quantity: 'B_1 5 mm below, T',
        expected: 0,
        scale: expected,
        read: harmonic('below', 1),
        bound: WAVE,
        slack: FAR,
      },
    ],
  };
}

/** Harmonics along a line may be off by this share of the fundamental. */
const WAVE = 2e-3;

/** The closed sides above and below reflect exp(-6 pi) of the fundamental. */
const FAR = 1e-8;

/** Four blocks a wave, each turned by 90 degrees. */
export function blockHalbach(): VerificationCase {
  const { wave, thickness, remanence } = ARRAY;
  const blocks = [0, 1, 2, 3];
  const materials = Object.fromEntries(
    blocks.map((i): [string, Material] => {
      const [x, y] = [
        [0, 1],
        [-1, 0],
        [0, -1],
        [1, 0],
      ][i];
      return [`block ${i}`, { kind: 'magnet', recoil: 1, remanence: [remanence * x, remanence * y] }];
    }),
  );
  const fundamental = halbachAmplitude(ARRAY, 1, OFF) * segmentShare(1, 4);
  const figure = (line: 'above' | 'below', n: number): Figure => {
    const strong = (n % 4 === 1) === (line === 'above');
    const expected = strong ? halbachAmplitude(ARRAY, n, OFF) * segmentShare(n, 4) : 0;
    return {
      quantity: `B_${n} 5 mm ${line}, T`,
      expected,
      scale: fundamental,
      read: harmonic(line, n),
      bound: WAVE,
      slack: FAR,
    };
  };
  return {
    name: 'Halbach array of four blocks a wave',
    formula:
      'B_n = Br sin(n pi/4)/(n pi/4) (1 - exp(-n k d)) exp(-n k y); n = 1, 5, ... on the strong side, 3, 7, ... on the weak',
    source: `${SOURCE} and confirmed by summing 3200 blocks`,
    section: arraySection(
      wave,
      blocks.map((i) => box(`block ${i}`, [((i + 0.5) * wave) / 4, 0], wave / 4, thickness)),
    ),
    setup: {
      materials: { air: AIR, ...materials },
      edges: { left: { kind: 'repeating' }, right: { kind: 'repeating' } },
    },
    probes: lineProbes(wave, 97),
    accuracy: 1e-3,
    figures: [
      figure('above', 1),
      figure('above', 5),
      figure('above', 3),
      figure('below', 3),
      figure('below', 7),
      figure('below', 1),
    ],
  };
}
