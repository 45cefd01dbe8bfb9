import type { PoleSection } from './pole-section.js';

/** Where a solved part is repeated: x becomes dx - x where mirrorX, else dx + x; y becomes -y where mirrorY. */
export interface Image {
  readonly mirrorX: boolean;
  readonly mirrorY: boolean;
  /** m. */
  readonly dx: number;
}

/** Images that, with the part itself, fill one pole pair from one gap between poles to the next but one, both discs. */
export function imagesOfPolePair(pole: PoleSection): Image[] {
  const images: Image[] = [];
  for (const dx of [0, pole.polePitch]) {
    for (const mirrorX of pole.cuts.magnetAxis ? [false, true] : [false]) {
      for (const mirrorY of pole.cuts.midPlane ? [false, true] : [false]) images.push({ mirrorX, mirrorY, dx });
    }
  }
  return images.slice(1); // the first is the part itself
}
