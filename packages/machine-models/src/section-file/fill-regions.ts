import type { Direction, Material, Shape } from '@gapwright/fem-core';
import { buildBHCurve, buildDemagnetisationCurve } from '@gapwright/fem-core';
import type { Path } from '@gapwright/fem-core/text';
import { findMaterial, type Materials } from '../input/check-materials.js';
import type { Report } from '../input/report.js';
import type { LibraryMaterial } from '../machine.js';
import type { RegionFile } from './schema.js';
import type { MagnetisedFile } from './schema-magnetised.js';

type Magnet = LibraryMaterial & { readonly kind: 'magnet' };

/** Names that are no material, each a search among all that are, told at most. */
const MOST_UNKNOWN = 50;

/** What fills a region: built only once nothing at all is wrong with the file. */
export type Filling = () => Material;

/** Judges what fills each region and which way its magnets point. */
export function fillRegions(
  regions: readonly RegionFile[],
  shapes: readonly Shape[],
  materials: Materials,
  report: Report,
): Filling[] {
  let unknown = 0;
  return regions.map((region, i) => {
    const path = ['regions', i];
    if (unknown >= MOST_UNKNOWN) return noFilling;
    const kinds = ['nonmagnetic', 'steel', 'steel-curve', 'magnet'] as const;
    const material = findMaterial(materials, region.material, kinds, 'a material', [...path, 'material'], report);
    if (material === undefined) {
      unknown++;
      return noFilling;
    }
    if (material.kind !== 'magnet') {
      if (region.magnetised !== undefined) {
        const wrong = `goes with a magnet, but ${region.material} is of kind ${material.kind}`;
        report.fault([...path, 'magnetised'], 'no-magnet', wrong, 'leave it out, or name a magnet material');
      }
      return plainFilling(material);
    }
    if (region.magnetised === undefined) {
      const wrong = `is missing, but ${region.material} is a magnet`;
      report.fault([...path, 'magnetised'], 'missing', wrong, 'give its direction, for example 90 deg from +x');
      return noFilling;
    }
    const direction = readDirection(region.magnetised, shapes[i], [...path, 'magnetised'], report);
    return magnetFilling(material, direction);
  });
}

/** What fills the background: any material but a magnet, whose direction could not be told. */
export function fillBackground(name: string, materials: Materials, report: Report): Filling {
  const kinds = ['nonmagnetic', 'steel', 'steel-curve'] as const;
  const material = findMaterial(materials, name, kinds, 'a material other than a magnet', ['background'], report);
  return material === undefined ? noFilling : plainFilling(material);
}

const noFilling: Filling = () => ({ kind: 'linear', muR: 1 });

function plainFilling(material: Exclude<LibraryMaterial, Magnet>): Filling {
  switch (material.kind) {
    case 'nonmagnetic':
      return noFilling;
    case 'steel':
      return () => ({ kind: 'linear', muR: material.muR });
    case 'steel-curve':
      return () => ({ kind: 'curve', curve: buildBHCurve(material.bh) });
  }
}

/** At 20 degC. */
function magnetFilling({ remanence, recoil, demagnetisation }: Magnet, direction: Direction): Filling {
  if (demagnetisation !== undefined) {
    return () => ({
      kind: 'directed-magnet',
      direction,
      recoil,
      along: buildDemagnetisationCurve(demagnetisation),
    });
  }
  const { angle, turns, gradient } = direction;
  if (turns !== undefined || gradient !== undefined) {
    return () => ({ kind: 'directed-magnet', direction, recoil, along: remanence });
  }
  return () => ({ kind: 'magnet', recoil, remanence: [remanence * Math.cos(angle), remanence * Math.sin(angle)] });
}

function readDirection(given: MagnetisedFile, shape: Shape, path: Path, report: Report): Direction {
  if (typeof given === 'number') return { angle: given };
  const ways = (['radial', 'turning', 'wavelength'] as const).filter((key) => given[key] !== undefined);
  if (ways.length !== 1) {
    const wrong = ways.length === 0 ? 'tells no direction' : `gives ${ways.join(' and ')} at once`;
    report.fault(path, 'one-of', wrong, 'give an angle alone, or exactly one of radial, turning and wavelength');
    return { angle: Number.NaN };
  }
  refuseStrays(given, ways[0], path, report);
  const angle = given.angle ?? 0;
  if (given.wavelength !== undefined) {
    const rate = ((given.sense === 'clockwise' ? -1 : 1) * 2 * Math.PI) / given.wavelength;
    const along = given.along ?? 0;
    const gradient = [rate * Math.cos(along), rate * Math.sin(along)] as const;
    return { angle, gradient, ...(given.centre === undefined ? {} : { centre: given.centre }) };
  }
  const centre = given.centre ?? (shape.kind === 'circle' ? shape.centre : undefined);
  if (centre === undefined) {
    report.fault([...path, 'centre'], 'missing', 'is missing', 'give the centre; only circles have one of their own');
    return { angle: Number.NaN };
  }
  if (given.radial !== undefined) return { angle: given.radial === 'outward' ? 0 : Math.PI, turns: 1, centre };
  return { angle, turns: given.turning ?? Number.NaN, centre };
}

const ALLOWED = {
  radial: ['centre'],
  turning: ['centre', 'angle'],
  wavelength: ['centre', 'angle', 'along', 'sense'],
} as const satisfies Record<string, readonly string[]>;

/** Keys that would be passed over in silence are a misunderstanding. */
function refuseStrays(
  given: Exclude<MagnetisedFile, number>,
  way: keyof typeof ALLOWED,
  path: Path,
  report: Report,
): void {
  const allowed: readonly string[] = ALLOWED[way];
  for (const key of ['angle', 'along', 'sense'] as const) {
    if (given[key] === undefined || allowed.includes(key)) continue;
    report.fault(
      [...path, key],
      'stray-key',
      `means nothing beside ${way}`,
      `leave it out, beside ${way} goes ${allowed.join(', ')}`,
    );
  }
}
