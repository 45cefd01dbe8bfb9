import type { EdgeCondition, Material, Point, Region, Section, Setup } from '@gapwright/fem-core';
import { buildBHCurve } from '@gapwright/fem-core';
import type { LibraryMaterial, Machine } from '../machine.js';

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
  /** Faces of the disc on the upper side, m; undefined where there is none. */
  readonly discFaces: readonly [face: number, back: number] | undefined;
  readonly steelRegions: readonly string[];
}

/** Air kept behind each disc, in pole pitches: there a harmonic n of stray field has fallen by exp(-1.5 n pi). */
const AIR_BEHIND = 1.5;

/** The smallest part of a pole that says all: twin discs with symmetric magnets are cut along both planes. */
export function symmetryCuts(machine: Machine): Cuts {
  const twin = machine.rotor.arrangement === 'twin';
  return { magnetAxis: true, midPlane: twin };
}

/** Width of a magnet along the circumference at a radius, m. */
export function magnetWidth(machine: Machine, radius: number): number {
  const { magnets, poles } = machine.rotor;
  return magnets.shape === 'block' ? magnets.width : (magnets.arc * 2 * Math.PI * radius) / poles;
}

/** Remanence at the magnets' temperature, T: linear in temperature from 20 degC (IEC 60404-8-1 states it so; from memory). */
export function remanenceAt(material: Extract<LibraryMaterial, { kind: 'magnet' }>, celsius: number): number {
  return material.remanence * (1 + material.remanenceSlope * (celsius - 20));
}

/**
 * One pole of the machine at one radius, unrolled: x along the circumference, y along the shaft, origin on the magnet's
 * axis at mid-gap; both magnets point along +y. Sides between poles reverse; at a cut along the magnet's axis no flux
 * crosses, at the mid-plane and midway between poles the field crosses at right angles.
 */
export function buildPoleSection(machine: Machine, radius: number, cuts: Cuts = symmetryCuts(machine)): PoleSection {
  const { rotor, winding } = machine;
  const polePitch = (2 * Math.PI * radius) / rotor.poles;
  const half = polePitch / 2;
  const width = magnetWidth(machine, radius);
  const face = rotor.gap / 2;
  const back = face + rotor.magnets.thickness;
  const rear = back + (rotor.disc?.thickness ?? 0);
  const end = rear + AIR_BEHIND * polePitch;
  const from = cuts.magnetAxis ? 0 : -half;
  const layer = (name: string, x0: number, x1: number, y0: number, y1: number): Region => ({
    name,
    shape: { kind: 'rectangle', from: [x0, y0], to: [x1, y1] },
    maxEdge: Math.min(Math.abs(y1 - y0), polePitch / 10),
  });
  const windingFrom = cuts.midPlane ? 0 : -winding.thickness / 2;
  const regions: Region[] = [layer('winding', from, half, windingFrom, winding.thickness / 2)];
  const steelRegions: string[] = [];
  for (const side of cuts.midPlane ? (['upper'] as const) : (['upper', 'lower'] as const)) {
    const sign = side === 'upper' ? 1 : -1;
    const x0 = cuts.magnetAxis ? 0 : -width / 2;
    regions.push(layer(`${side} magnet`, x0, width / 2, sign * face, sign * back));
    if (rotor.disc === undefined) continue;
    regions.push(layer(`${side} disc`, from, half, sign * back, sign * rear));
    steelRegions.push(`${side} disc`);
  }
  const low: Point = [from, cuts.midPlane ? 0 : -end];
  const section: Section = {
    outline: { kind: 'rectangle', from: low, to: [half, end] },
    background: 'air',
    maxEdge: polePitch / 4,
    regions,
    matched: cuts.magnetAxis ? [] : [['left', 'right']],
  };
  return {
    section,
    setup: { materials: materialsOf(machine, regions), edges: edgesOf(cuts) },
    cuts,
    copies: (cuts.magnetAxis ? 2 : 1) * (cuts.midPlane ? 2 : 1),
    polePitch,
    from,
    to: half,
    windingFrom,
    windingTo: winding.thickness / 2,
    discFaces: rotor.disc === undefined ? undefined : [back, rear],
    steelRegions,
  };
}

function edgesOf(cuts: Cuts): Record<string, EdgeCondition> {
  return {
    top: { kind: 'closed' },
    bottom: { kind: cuts.midPlane ? 'crossing' : 'closed' },
    left: { kind: cuts.magnetAxis ? 'closed' : 'reversing' },
    right: { kind: cuts.magnetAxis ? 'crossing' : 'reversing' },
  };
}

function materialsOf(machine: Machine, regions: readonly Region[]): Record<string, Material> {
  const { rotor, materials } = machine;
  const air: Material = { kind: 'linear', muR: 1 };
  const steel = rotor.disc === undefined ? air : fieldMaterial(materials[rotor.disc.material], 20);
  const magnet = fieldMaterial(materials[rotor.magnets.material], rotor.magnets.temperature);
  const filling: Record<string, Material> = { air };
  for (const { name } of regions)
    filling[name] = name.endsWith('magnet') ? magnet : name.endsWith('disc') ? steel : air;
  return filling;
}

/** A library material as the field sees it; magnets point along +y. */
function fieldMaterial(material: LibraryMaterial, celsius: number): Material {
  switch (material.kind) {
    case 'nonmagnetic':
      return { kind: 'linear', muR: 1 };
    case 'steel':
      return { kind: 'linear', muR: material.muR };
    case 'steel-curve':
      return { kind: 'curve', curve: buildBHCurve(material.bh) };
    case 'magnet':
      return { kind: 'magnet', recoil: material.recoil, remanence: [0, remanenceAt(material, celsius)] };
  }
}
