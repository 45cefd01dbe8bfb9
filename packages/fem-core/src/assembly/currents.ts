import { regionAreas } from '../elements/areas.js';
import type { Mesh } from '../mesh/mesh.js';
import type { Setup } from './setup.js';
import { own } from './setup.js';

/**
 * Current density of each region out of the page, A/m^2: Float64Array(regions). Currents given as a whole are spread over
 * the area that the mesh covers, so that they are met exactly. In unbounded space the net current returns evenly through the
 * image of what lies beyond: by Ampere's law that changes nothing but a constant of A within the circle.
 */
export function currentDensities(mesh: Mesh, setup: Setup): Float64Array {
  const areas = regionAreas(mesh);
  const density = Float64Array.from(mesh.regionNames, (name, region) => {
    const whole = own(setup.current, name) ?? 0;
    const spread = whole === 0 || areas[region] === 0 ? 0 : whole / areas[region];
    return (own(setup.currentDensity, name) ?? 0) + spread;
  });
  if (mesh.beyond === undefined) return density;
  const { region } = mesh.beyond;
  density[region] = 0;
  density[region] = -sumOf(density, areas) / areas[region];
  return density;
}

const sumOf = (density: Float64Array, areas: readonly number[]): number =>
  density.reduce((sum, value, k) => sum + value * areas[k], 0);

/** Sum of all currents out of the page, A; in unbounded space what returns beyond does not count. */
export function netCurrent(mesh: Mesh, setup: Setup): number {
  const density = currentDensities(mesh, setup);
  if (mesh.beyond !== undefined) density[mesh.beyond.region] = 0;
  return sumOf(density, regionAreas(mesh));
}
