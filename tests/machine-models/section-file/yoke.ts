import { readSection, type SectionReadResult } from '../../../packages/machine-models/src/section-file/read-section.js';

/** A gapped yoke with a coil of two sides and a magnet: a bit of everything. */
export const YOKE = `format: gapwright-section/1
name: Gapped yoke
depth: 40 mm
materials:
  plate: { kind: steel, mu_r: 2000 }
outline: { rectangle: { from: [0 mm, 0 mm], to: [120 mm, 100 mm] } }
background: air
regions:
  - { name: yoke, material: plate, shape: { polygon: [[20 mm, 20 mm], [90 mm, 20 mm], [90 mm, 35 mm], [20 mm, 35 mm]] } }
  - { name: coil, material: copper, shape: { rectangle: { from: [40 mm, 40 mm], to: [60 mm, 50 mm] } }, turns: 200, current: 3 A }
  - { name: back, material: copper, shape: { rectangle: { from: [40 mm, 5 mm], to: [60 mm, 15 mm] } }, turns: -200, current: 3 A }
  - { name: bar, material: copper, shape: { circle: { centre: [10 mm, 80 mm], radius: 5 mm } }, current_density: 2 A/mm2 }
  - { name: bar_magnet, material: N42, magnetised: 90 deg, shape: { circle: { centre: [60 mm, 70 mm], radius: 5 mm } } }
edges:
  - { side: left, condition: crossing }
probes:
  - { name: centre, point: [60 mm, 50 mm] }
  - { name: across, line: { from: [0 mm, 50 mm], to: [120 mm, 50 mm], points: 91 } }
  - { name: pull, force_on: bar_magnet }
  - { name: linkage, linkage_of: back }
  - { name: flux, flux_through: { from: [20 mm, 36 mm], to: [90 mm, 36 mm] } }
  - { name: average, mean_over: yoke }
model: { accuracy: 0.2 % }
`;

/** Reads the yoke, or another text, with some keys set anew, each as `KEY=VALUE`. */
export function readYoke(settings: readonly string[] = [], text = YOKE): SectionReadResult {
  return readSection(text, {
    file: 'yoke.yaml',
    settings: settings.map((setting) => {
      const at = setting.indexOf('=');
      return { key: setting.slice(0, at), value: setting.slice(at + 1) };
    }),
  });
}

/** The yoke's text with one piece in place of another, and the line where the new piece stands. */
export function editYoke(from: string, to: string): { readonly text: string; readonly line: number } {
  const start = YOKE.indexOf(from);
  if (start < 0 || YOKE.indexOf(from, start + 1) >= 0) throw new Error(`${from} is not in the text just once`);
  return { text: YOKE.replace(from, () => to), line: YOKE.slice(0, start).split('\n').length };
}
