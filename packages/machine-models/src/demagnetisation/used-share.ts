import { MU0 } from '@gapwright/fem-core';
import { triangleCount } from '@gapwright/fem-core/mesh';
import type { Machine } from '../machine.js';
import { kneeAt } from '../materials/at-temperature.js';
import type { SolvedSlice } from '../slices/solve-slice.js';
import { magnetOf } from './magnet-of.js';

/**
 * For a picture of the open machine: how much of what a magnet bears is used, |H| / |H at the knee|, both along the
 * magnetisation, 1 and more where it loses strength for good. Float64Array(6m): at the six nodes of each triangle, in local
 * order; 0 outside magnets, where H does not oppose the magnetisation, and where the knee is not known.
 */
export function usedShare(machine: Machine, { field, recovered, pole }: SolvedSlice): Float64Array {
  const { mesh, setup } = field;
  const share = new Float64Array(6 * triangleCount(mesh));
  const celsius = machine.rotor.magnets.temperature;
  // By region: |H|/|H at the knee| = rest - x Bx - y By.
  const laws = mesh.regionNames.map((region) => {
    const material = setup.materials[region];
    if (!pole.magnetRegions.includes(region) || material?.kind !== 'magnet') return undefined;
    const knee = kneeAt(magnetOf(machine, region).magnet, celsius);
    if (knee === undefined) return undefined;
    const [mx, my] = material.remanence;
    const remanence = Math.hypot(mx, my);
    const most = -knee.h * MU0 * material.recoil;
    return { rest: remanence / most, x: mx / (remanence * most), y: my / (remanence * most) };
  });
  for (let t = 0; t < triangleCount(mesh); t++) {
    const law = laws[mesh.triangleToRegion[t]];
    if (law === undefined) continue;
    for (let i = 0; i < 6; i++) {
      const [bx, by] = [recovered[12 * t + 6 + i], -recovered[12 * t + i]];
      share[6 * t + i] = Math.max(0, law.rest - law.x * bx - law.y * by);
    }
  }
  return share;
}
