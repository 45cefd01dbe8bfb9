import type { EdgeCondition, Material, Point, Region, Section, Setup } from '@gapwright/fem-core';
import { buildBHCurve } from '@gapwright/fem-core';
import type { LibraryMaterial, Machine } from '../machine.js';
import { remanenceAt } from '../materials/at-temperature.js';
import { interpoleWidth } from '../rotor/interpole-shape.js';
import { magnetWidth, segmentCount } from '../rotor/magnet-shape.js';

/** Which planes of symmetry a section is cut along: the magnet's axis x = 0, the mid-plane of the gap y = 0. */
export interface Cuts {
  readonly magnetAxis: boolean;
  readonly midPlane: boolean;
}

/** The part of one pole pitch that is drawn and solved. */
export interface PoleSection {
  readonly section: Section;
  readonly setup: Setup;
  readonly cuts: Cuts;
  /** The whole pole is this many times what is drawn. */
  readonly copies: number;
  readonly polePitch: number;
  /** Extent along the circumference, m. */
  readonly from: number;
  readonly to: number;
  /** Lower border of the winding as drawn: 0 at the mid-plane cut, else minus half its thickness, m. */
  readonly windingFrom: number;
  readonly windingTo: number;
  /** Discs that are whole midway between two poles, y of face and back, m: the upper one, and a keeper. */
  readonly discCuts: readonly (readonly [face: number, back: number])[];
  readonly steelRegions: readonly string[];
  readonly magnetRegions: readonly string[];
}

/** Air kept behind each disc, in pole pitches: there a harmonic n of stray field has fallen by exp(-1.5 n pi). */
const AIR_BEHIND = 1.5;
/** The same where nothing keeps the field in: no steel, or plates with interpoles between them. */
const AIR_BEHIND_OPEN = 2.5;
/** Parts narrower than this share of the pole pitch are left out: what a radius at the very end of a round magnet cuts. */
const NOTHING = 1e-6;

/** The smallest part of a pole that says all: twin discs with symmetric magnets are cut along both planes. */
export function symmetryCuts(machine: Machine): Cuts {
  const twin = machine.rotor.arrangement === 'twin';
  return { magnetAxis: true, midPlane: twin };
}

/** A part of the section and what fills it. */
interface Part {
  readonly name: string;
  readonly kind: 'winding' | 'disc' | 'magnet';
  readonly x: readonly [from: number, to: number];
  readonly y: readonly [from: number, to: number];
  readonly material: Material;
}

/**
 * One pole of the machine at one radius, unrolled: x along the circumference, y along the shaft, origin on the magnet's
 * axis at mid-gap; the magnets there point along +y. Sides between poles reverse; at a cut along the magnet's axis no flux
 * crosses, at the mid-plane and midway between poles the field crosses at right angles.
 *
 * All that turns the magnetisation on its way from pole to pole turns it so that the gap gains and the outside loses: above
 * the gap towards +x right of the axis, below it towards -x (Mallinson, One-sided fluxes, 1973; title from memory).
 *
 * @throws Error for a cut along the mid-plane of a machine whose discs are not alike
 */
export function buildPoleSection(machine: Machine, radius: number, cuts: Cuts = symmetryCuts(machine)): PoleSection {
  const { rotor, winding } = machine;
  if (cuts.midPlane && rotor.arrangement !== 'twin') throw new Error('a keeper does not mirror the magnet disc');
  const polePitch = (2 * Math.PI * radius) / rotor.poles;
  const half = polePitch / 2;
  const from = cuts.magnetAxis ? 0 : -half;
  const windingFrom = cuts.midPlane ? 0 : -winding.thickness / 2;
  const windingTo = winding.thickness / 2;
  const parts: Part[] = [
    { name: 'winding', kind: 'winding', x: [from, half], y: [windingFrom, windingTo], material: AIR },
    ...discSide(machine, radius, from, 'upper'),
  ];
  if (!cuts.midPlane) {
    parts.push(
      ...(rotor.arrangement === 'twin' ? discSide(machine, radius, from, 'lower') : keeperSide(machine, half, from)),
    );
  }
  const regions = parts.map((part) => regionOf(part, polePitch));
  const open = rotor.disc === undefined || rotor.interpoles?.through === true;
  const behind = (open ? AIR_BEHIND_OPEN : AIR_BEHIND) * polePitch;
  const [lowest, highest] = [Math.min(...parts.map(({ y }) => y[0])), Math.max(...parts.map(({ y }) => y[1]))];
  const low: Point = [from, cuts.midPlane ? 0 : lowest - behind];
  const namesOf = (kind: Part['kind']): string[] => parts.filter((part) => part.kind === kind).map(({ name }) => name);
  return {
    section: {
      outline: { kind: 'rectangle', from: low, to: [half, highest + behind] },
      background: 'air',
      maxEdge: polePitch / 4,
      regions,
      matched: cuts.magnetAxis ? [] : [['left', 'right']],
    },
    setup: {
      materials: { air: AIR, ...Object.fromEntries(parts.map(({ name, material }) => [name, material])) },
      edges: edgesOf(cuts),
    },
    cuts,
    copies: (cuts.magnetAxis ? 2 : 1) * (cuts.midPlane ? 2 : 1),
    polePitch,
    from,
    to: half,
    windingFrom,
    windingTo,
    discCuts: discCuts(machine),
    steelRegions: namesOf('disc'),
    magnetRegions: namesOf('magnet'),
  };
}

const AIR: Material = { kind: 'linear', muR: 1 };

function regionOf({ name, x, y }: Part, polePitch: number): Region {
  return {
    name,
    shape: { kind: 'rectangle', from: [x[0], y[0]], to: [x[1], y[1]] },
    maxEdge: Math.min(x[1] - x[0], y[1] - y[0], polePitch / 10),
  };
}

/** The disc with its magnets on one side of the gap, from the mid-plane outwards: disc first, interpoles over it. */
function discSide(machine: Machine, radius: number, from: number, side: 'upper' | 'lower'): Part[] {
  const { rotor, materials } = machine;
  const half = (Math.PI * radius) / rotor.poles;
  const face = rotor.gap / 2;
  const back = face + rotor.magnets.thickness;
  const sign = side === 'upper' ? 1 : -1;
  const layer = (y0: number, y1: number): readonly [number, number] => (sign > 0 ? [y0, y1] : [-y1, -y0]);
  const parts: Part[] = [];
  if (rotor.disc !== undefined) {
    parts.push({
      name: `${side} disc`,
      kind: 'disc',
      x: [from, half],
      y: layer(back, back + rotor.disc.thickness),
      material: fieldMaterial(materials[rotor.disc.material], 20),
    });
  }
  const magnet = (name: string, x0: number, x1: number, y1: number, material: string, angle: number): void => {
    const x = [Math.max(from, x0), Math.min(half, x1)] as const;
    if (x[1] - x[0] <= NOTHING * half) return;
    const filling = fieldMaterial(materials[material], rotor.magnets.temperature, sign > 0 ? angle : Math.PI - angle);
    parts.push({ name: `${side} ${name}`, kind: 'magnet', x, y: layer(face, y1), material: filling });
  };
  const pieces = segmentCount(rotor.magnets);
  if (pieces > 1) {
    // Piece k stands at k/pieces of a pole pitch and is turned by as much of half a turn.
    const [first, last] = [Math.ceil((pieces * from) / (2 * half) - 0.5), Math.floor(pieces / 2 + 0.5)];
    for (let k = first; k <= last; k++) {
      const centre = (2 * half * k) / pieces;
      const name = k === 0 ? 'magnet' : `magnet ${k}`;
      magnet(
        name,
        centre - half / pieces,
        centre + half / pieces,
        back,
        rotor.magnets.material,
        Math.PI * (0.5 - k / pieces),
      );
    }
    return parts;
  }
  const width = magnetWidth(rotor.magnets, rotor.poles, radius);
  magnet('magnet', -width / 2, width / 2, back, rotor.magnets.material, Math.PI / 2);
  if (rotor.interpoles !== undefined) {
    const { depth, material } = rotor.interpoles;
    const gap = interpoleWidth(rotor.interpoles, rotor.magnets, rotor.poles, radius);
    magnet('interpole', half - gap / 2, half, face + depth, material, 0);
    magnet('left interpole', -half, -half + gap / 2, face + depth, material, Math.PI);
  }
  return parts;
}

function keeperSide({ rotor, materials }: Machine, half: number, from: number): Part[] {
  if (rotor.keeper === undefined) return [];
  const face = -rotor.gap / 2;
  const material = fieldMaterial(materials[rotor.keeper.material], 20);
  return [{ name: 'keeper', kind: 'disc', x: [from, half], y: [face - rotor.keeper.thickness, face], material }];
}

function discCuts({ rotor }: Machine): PoleSection['discCuts'] {
  if (rotor.disc === undefined || rotor.interpoles?.through === true) return [];
  const back = rotor.gap / 2 + rotor.magnets.thickness;
  const disc = [back, back + rotor.disc.thickness] as const;
  return rotor.keeper === undefined ? [disc] : [disc, [-rotor.gap / 2, -rotor.gap / 2 - rotor.keeper.thickness]];
}

function edgesOf(cuts: Cuts): Record<string, EdgeCondition> {
  return {
    top: { kind: 'closed' },
    bottom: { kind: cuts.midPlane ? 'crossing' : 'closed' },
    left: { kind: cuts.magnetAxis ? 'closed' : 'reversing' },
    right: { kind: cuts.magnetAxis ? 'crossing' : 'reversing' },
  };
}

/** A library material as the field sees it; magnets point at `angle` from +x. */
function fieldMaterial(material: LibraryMaterial, celsius: number, angle = Math.PI / 2): Material {
  switch (material.kind) {
    case 'nonmagnetic':
      return AIR;
    case 'steel':
      return { kind: 'linear', muR: material.muR };
    case 'steel-curve':
      return { kind: 'curve', curve: buildBHCurve(material.bh) };
    case 'magnet': {
      const strength = remanenceAt(material, celsius);
      const [x, y] = [Math.cos(angle), Math.sin(angle)].map((part) => (Math.abs(part) < 1e-15 ? 0 : part * strength));
      return { kind: 'magnet', recoil: material.recoil, remanence: [x, y] };
    }
  }
}
