import { materialOf } from '../assembly/setup.js';
import { InputError } from '../base/fault.js';
import { BEYOND_REGION } from '../geometry/unbounded.js';
import { cornerCount, edgeCount, nodeCount, triangleCount } from '../mesh/mesh.js';
import type { Field } from './field.js';

/** Regions of air: where Maxwell's stress has no divergence. */
export function airRegions({ mesh, setup }: Field): string[] {
  return mesh.regionNames.filter((name) => {
    if (name === BEYOND_REGION) return false; // an image: distances there are not those of space
    const material = materialOf(setup, name);
    const current = (setup.currentDensity?.[name] ?? 0) !== 0 || (setup.current?.[name] ?? 0) !== 0;
    return material?.kind === 'linear' && material.muR === 1 && !current;
  });
}

/** Elements between the body and where the layer ends, where there is room. */
const DEPTH = 3;

/**
 * A function that is 1 on the named regions and 0 on all else that is not air, and on the outline: it falls by a third a ring
 * of elements round the body.
 *
 * @returns Float64Array(nodes): its value at every node, at middles the mean of the ends, so that it is 1 all along a round
 * body too; quadratic in between
 * @throws InputError where the body is not surrounded by air (linear, mu_r = 1, no current) or touches another body
 */
export function airLayer(field: Field, regions: readonly string[]): Float64Array {
  const { mesh } = field;
  const place = placesOf(field, regions);
  const n = cornerCount(mesh);
  const ring = Int32Array.from(place, (at) => (at === BODY ? 0 : DEPTH));
  for (let depth = 1; depth < DEPTH; depth++) {
    for (let t = 0; t < triangleCount(mesh); t++) {
      const [a, b, c] = mesh.triangles.subarray(3 * t, 3 * t + 3);
      if (ring[a] !== depth - 1 && ring[b] !== depth - 1 && ring[c] !== depth - 1) continue;
      for (const v of [a, b, c]) if (place[v] === AIR && ring[v] > depth) ring[v] = depth;
    }
  }
  const layer = new Float64Array(nodeCount(mesh));
  for (let v = 0; v < n; v++) layer[v] = 1 - ring[v] / DEPTH;
  for (let e = 0; e < edgeCount(mesh); e++) {
    layer[n + e] = 0.5 * (layer[mesh.edges[2 * e]] + layer[mesh.edges[2 * e + 1]]);
  }
  return layer;
}

const AIR = 0;
const BODY = 1;
const OTHER = 2;

/** What each corner lies on: the body, other things (the outline too, where it is not bound), or air alone. */
function placesOf(field: Field, regions: readonly string[]): Uint8Array {
  const { mesh } = field;
  const air = airRegions(field);
  const kind = mesh.regionNames.map((name) => (regions.includes(name) ? BODY : air.includes(name) ? AIR : OTHER));
  const place = new Uint8Array(cornerCount(mesh));
  const other = new Uint8Array(cornerCount(mesh));
  for (let i = 0; i < mesh.triangles.length; i++) {
    const k = kind[mesh.triangleToRegion[(i / 3) | 0]];
    if (k === BODY) place[mesh.triangles[i]] = BODY;
    else if (k === OTHER) other[mesh.triangles[i]] = 1;
  }
  if (!place.includes(BODY))
    throw fault('names no region with area', `regions here are: ${mesh.regionNames.join(', ')}`);
  if (place.some((at, v) => at === BODY && other[v] === 1)) {
    throw fault(
      'touches another body',
      'a force is defined on a body with air all round it; name all parts that move together',
    );
  }
  // Stress on the outline pushes whatever lies beyond; on bound sides what leaves by the one comes in by the other.
  for (let e = 0; e < edgeCount(mesh); e++) {
    const side = mesh.edgeToSide[e];
    if (side < 0 || isBound(field, side)) continue;
    other[mesh.edges[2 * e]] = 1;
    other[mesh.edges[2 * e + 1]] = 1;
  }
  return place.map((at, v) => (at === AIR && other[v] === 1 ? OTHER : at));

  function fault(wrong: string, remedy: string): InputError {
    return new InputError([{ code: 'no-force', key: regions.join(', '), wrong, remedy }]);
  }
}

function isBound({ mesh, setup }: Field, side: number): boolean {
  const kind = setup.edges?.[mesh.sideNames[side]]?.kind;
  return mesh.beyond === undefined && (kind === 'repeating' || kind === 'reversing');
}
