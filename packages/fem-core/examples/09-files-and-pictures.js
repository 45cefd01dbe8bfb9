// A field as a picture (SVG) and as VTK XML, and read back. Builds on 03.
// Run: node packages/fem-core/examples/09-files-and-pictures.js [FOLDER]
// Then: open field.svg in a browser and field.vtu in any reader of VTK files.
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { drawField, readVtu, solveProbes, triangleMeans, writeVtu } from '@gapwright/fem-core';

const air = { kind: 'linear', muR: 1 };
const { field, recovered } = solveProbes(
  {
    outline: { kind: 'rectangle', from: [-0.05, -0.04], to: [0.05, 0.04] },
    background: 'air',
    regions: [
      { name: 'magnet', shape: { kind: 'circle', centre: [-0.015, 0], radius: 0.012 } },
      {
        name: 'steel',
        shape: {
          kind: 'polygon',
          corners: [
            [0.005, -0.02],
            [0.02, 0],
            [0.005, 0.02],
          ],
        },
      },
    ],
  },
  {
    materials: {
      air,
      magnet: { kind: 'magnet', recoil: 1.05, remanence: [1.2, 0] },
      steel: { kind: 'linear', muR: 1000 },
    },
  },
  [],
  { accuracy: 1e-2 },
);
const { mesh, potential } = field;
// |B| at the six nodes of each triangle, from the recovered gradient of A.
const magnitude = Float64Array.from({ length: recovered.length / 2 }, (_, i) => {
  const [t, k] = [Math.floor(i / 6), i % 6];
  return Math.hypot(recovered[12 * t + k], recovered[12 * t + 6 + k]);
});
const picture = drawField({ mesh, potential, magnitude }, { title: 'Magnet and steel wedge' });
const text = writeVtu({ mesh, potential, ...triangleMeans(field) });

const [folder] = process.argv.slice(2);
if (folder !== undefined) {
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(folder, 'field.svg'), picture);
  writeFileSync(join(folder, 'field.vtu'), text);
}
const back = readVtu(text).pointData.get('A').values;
const worst = back.reduce((most, a, node) => Math.max(most, Math.abs(a - potential[node])), 0);
console.log(`picture of ${picture.length} characters, VTK file of ${text.length}`);
console.log(`check: largest difference of A read back = ${0}, got ${worst}, within 0`);
