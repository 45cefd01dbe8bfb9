import { minimumDegreeOrder } from './minimum-degree.js';
import type { Placement } from './nested-dissection.js';
import { dissectionOrder } from './nested-dissection.js';
import type { SymmetricPattern } from './pattern.js';

/** From so many unknowns on a factorisation takes less work after dissection; the order itself is found sooner anyway. */
const DISSECT_FROM = 1500;
/** The same where all unknowns are corners: separators one corner wide, without middles, gain later. */
const DISSECT_CORNERS_FROM = 10_000;
/** With fewer corners than this share there is little to cut: most elements lie between fixed corners. */
const FEWEST_CORNERS = 1 / 8;

/**
 * The fill-reducing order that serves best: minimum degree for small systems and where no placement is known, else dissection.
 * @returns Int32Array(n): order[k] is the unknown eliminated as number k
 */
export function chooseOrder(pattern: SymmetricPattern, placement?: Placement): Int32Array {
  const least = placement?.ends === undefined ? DISSECT_CORNERS_FROM : DISSECT_FROM;
  const dissects = placement !== undefined && pattern.n >= least && cornerShare(placement) >= FEWEST_CORNERS;
  return dissects ? dissectionOrder(pattern, placement) : minimumDegreeOrder(pattern);
}

function cornerShare({ ends }: Placement): number {
  if (ends === undefined) return 1;
  let corners = 0;
  for (let i = 0; 2 * i < ends.length; i++) if (ends[2 * i] === i && ends[2 * i + 1] === i) corners++;
  return (2 * corners) / ends.length;
}
