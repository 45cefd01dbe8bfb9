import { join } from 'node:path';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { measureMesh, meshSection, triangleCount } from '@gapwright/fem-core/mesh';
import type { Comparison } from './comparison.js';
import { builtPeer, targetAt } from './comparison.js';
import type { Peer } from './peer.js';
import { timerOfPeer, withPeers } from './peer.js';
import { drawing, LIMITS, MIN_ANGLE, writeDrawing } from './systems.js';
import { interleave, timerOf } from './timing.js';

/** Wished triangles and the longest edge that gives about as many. */
const SIZES = [
  [5_000, 0.0317],
  [35_000, 0.0121],
  [150_000, 0.0058],
] as const;

export async function compareMesher(comparison: Comparison): Promise<void> {
  const peer = builtPeer('cgal');
  if (peer === undefined) return;
  await withPeers([peer], async () => {
    for (const [wished, maxEdge] of SIZES) await compareDrawing(comparison, peer, wished, maxEdge);
  });
}

async function compareDrawing(
  { runs, folder, add }: Comparison,
  peer: Peer,
  wished: number,
  maxEdge: number,
): Promise<void> {
  const drawn = drawing(maxEdge);
  const file = join(folder, 'drawing.bin');
  writeDrawing(file, drawn, MIN_ANGLE);
  await peer.ask('load', file);
  const theirs = timerOfPeer(peer, 'mesh');
  const [oursMs, theirsMs] = await interleave(runs, [timerOf(() => meshSection(drawn.section, LIMITS)), theirs.timer]);
  const mesh = meshSection(drawn.section, LIMITS);
  const { triangles, angle, longest } = theirs.last();
  const size = `${triangleCount(mesh)}`;
  const check =
    `smallest angles ${measureMesh(mesh).minAngleDeg.toFixed(1)}, ${Number(angle).toFixed(1)} deg; ` +
    `longest edges ${(longestEdge(mesh) / maxEdge).toFixed(3)}, ${Number(longest).toFixed(3)} of the limit`;
  const common = { peer: 'CGAL Delaunay_mesher_2', size, check };
  add({
    part: 'quality mesh',
    ...common,
    ours: oursMs,
    theirs: theirsMs,
    ...targetAt(wished, [
      [5_000, 1.2, 0.6],
      [35_000, 0.6, 0.25],
    ]),
  });
  add({
    part: 'number of triangles',
    ...common,
    ours: triangleCount(mesh),
    theirs: Number(triangles),
    count: true,
    must: 1.1,
    aim: 1,
  });
}

function longestEdge({ xy, edges }: Mesh): number {
  let longest = 0;
  for (let e = 0; e < edges.length; e += 2) {
    const [a, b] = [2 * edges[e], 2 * edges[e + 1]];
    longest = Math.max(longest, Math.hypot(xy[a] - xy[b], xy[a + 1] - xy[b + 1]));
  }
  return longest;
}
