import type { PictureCopy } from '@gapwright/fem-core';
import type { PoleSection } from './pole-section.js';

/** Images that, with the part itself, fill one pole pair from one gap between poles to the next but one, both discs. */
export function imagesOfPolePair(pole: PoleSection): PictureCopy[] {
  const images: PictureCopy[] = [];
  for (const dx of [0, pole.polePitch]) {
    for (const mirrorX of pole.cuts.magnetAxis ? [false, true] : [false]) {
      for (const mirrorY of pole.cuts.midPlane ? [false, true] : [false]) images.push({ mirrorX, mirrorY, dx });
    }
  }
  return images.slice(1); // the first is the part itself
}
