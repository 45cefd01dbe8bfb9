import type { Coil, InductanceMatrix, Material, Region, Section, Setup } from '@gapwright/fem-core';
import { inductancesAt } from '@gapwright/fem-core';
import { meshSection, solveOnMesh } from '@gapwright/fem-core/mesh';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { buildPoleSection } from '../../../packages/machine-models/src/slices/pole-section.js';

/** A leg: where its middle stands in pole pitches from a magnet's axis, and its turns, + out of the page. */
export interface Leg {
  readonly at: number;
  readonly turns: number;
}

/**
 * Inductances per metre of depth of coils drawn leg by leg over so many poles, whose two sides repeat (even) or reverse (odd):
 * frozen permeability about the magnets' own field, by the solver's own inductances. Of twin discs; the lower half is the
 * mirror image of what is solved.
 */
export function directInductances(
  machine: Machine,
  radius: number,
  poles: number,
  coils: readonly (readonly Leg[])[],
  legWidth: number,
  fineness = 12,
): InductanceMatrix {
  const pole = buildPoleSection(machine, radius, { magnetAxis: false, midPlane: true });
  const tau = pole.polePitch;
  const { outline } = pole.section;
  if (outline.kind !== 'rectangle') throw new Error('not a rectangle');
  const materials: Record<string, Material> = { ...pole.setup.materials };
  const regions: Region[] = [];
  for (let p = 0; p < poles; p++) {
    for (const { name, shape } of pole.section.regions) {
      if (name === 'winding' || shape.kind !== 'rectangle') continue;
      const shifted = (x: number): number => x + p * tau;
      const own = `${p} ${name}`;
      const from = [shifted(shape.from[0]), shape.from[1]] as const;
      const to = [shifted(shape.to[0]), shape.to[1]] as const;
      regions.push({ name: own, shape: { kind: 'rectangle', from, to }, maxEdge: tau / fineness });
      materials[own] = turned(pole.setup.materials[name], p % 2 === 1);
    }
  }
  const [left, right] = [-tau / 2, (poles - 0.5) * tau];
  const thickness = machine.winding.thickness;
  const list = coils.map((legs, c): Coil => {
    const sides: { region: string; turns: number }[] = [];
    legs.forEach(({ at, turns }, l) => {
      // The pieces of the leg in this section and the next one on either side, by which it may stick out.
      for (const image of [-1, 0, 1]) {
        const middle = at * tau + image * poles * tau;
        const [a, b] = [Math.max(left, middle - legWidth / 2), Math.min(right, middle + legWidth / 2)];
        if (b - a < 1e-9 * tau) continue;
        const region = `coil ${c} leg ${l} ${image}`;
        const shape = { kind: 'rectangle', from: [a, 0], to: [b, thickness / 2] } as const;
        regions.push({ name: region, shape, maxEdge: tau / fineness });
        materials[region] = { kind: 'linear', muR: 1 };
        const sign = poles % 2 === 1 && image !== 0 ? -1 : 1;
        sides.push({ region, turns: (sign * turns * (b - a)) / legWidth });
      }
    });
    return { name: `coil ${c}`, sides };
  });
  const section: Section = {
    outline: { kind: 'rectangle', from: [left, 0], to: [right, outline.to[1]] },
    background: 'air',
    maxEdge: tau / 4,
    regions,
    matched: [['left', 'right']],
  };
  const side = { kind: poles % 2 === 1 ? 'reversing' : 'repeating' } as const;
  const setup: Setup = { materials, edges: { bottom: { kind: 'crossing' }, left: side, right: side } };
  const { field, system } = solveOnMesh(meshSection(section), setup);
  // All turns in the upper half: twice the current of the whole leg's there.
  return inductancesAt({ field, system }, list).apparent.map((row) => row.map((l) => l / 2));
}

function turned(material: Material | undefined, around: boolean): Material {
  if (material === undefined) throw new Error('no material');
  if (material.kind !== 'magnet' || !around) return material;
  return { ...material, remanence: [-material.remanence[0], -material.remanence[1]] };
}
