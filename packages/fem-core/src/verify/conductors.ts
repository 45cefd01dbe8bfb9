import { MU0 } from '../base/constants.js';
import type { Point } from '../geometry/section.js';
import type { Material } from '../materials/material.js';
import type { Probe } from '../probes/probe.js';
import { AIR, allSides, box, disc, held, mm, rectangularSection, roundSection } from './drawing.js';
import { energyOf, forceOf, linkageOf, magnitudeAt, pointOf, scaled, summed } from './readings.js';
import type { Figure, VerificationCase } from './verification-case.js';

const TEXTBOOK = 'any electromagnetics text; number computed here';

/** A of a line current at `at`, zero at the distance `zero` from it; outside itself, also of a round conductor. */
export const lineCurrent =
  (current: number, at: Point, zero = 1) =>
  (x: number, y: number): number =>
    ((-MU0 * current) / (2 * Math.PI)) * Math.log(Math.hypot(x - at[0], y - at[1]) / zero);

/** Inductance per metre of a round conductor of radius a with A = 0 at radius R0, H/m. */
const roundConductorInductance = (a: number, rim: number): number => (MU0 / (2 * Math.PI)) * (0.25 + Math.log(rim / a));

export function roundConductor(): VerificationCase {
  const [a, rim, current] = [0.002, 0.02, 10];
  const potential = (r: number): number =>
    ((MU0 * current) / (2 * Math.PI)) * (r <= a ? Math.log(rim / a) + (1 - (r / a) ** 2) / 2 : Math.log(rim / r));
  const flux = (r: number): number => ((MU0 * current) / (2 * Math.PI)) * (r <= a ? r / a ** 2 : 1 / r);
  const inductance = roundConductorInductance(a, rim);
  const radii = [0.001, 0.004, 0.01];
  const probes = radii.map(
    (r): Probe => ({ kind: 'point', name: `r ${mm(r)}`, at: [r * Math.cos(0.4), r * Math.sin(0.4)] }),
  );
  return {
    name: 'round conductor',
    formula: 'B = mu0 I r/(2 pi a^2) inside, mu0 I/(2 pi r) outside; L = mu0/(2 pi) (1/4 + ln(R0/a))',
    source: `Ampere's law; ${TEXTBOOK}`,
    section: roundSection(rim, 'air', [disc('wire', a)]),
    setup: { materials: { wire: AIR, air: AIR }, current: { wire: current } },
    probes: [
      { kind: 'point', name: 'centre', at: [0, 0] },
      ...probes,
      { kind: 'linkage', name: 'wire', of: 'wire', turns: 1 },
    ],
    accuracy: 1e-3,
    figures: [
      { quantity: 'A at the centre, Wb/m', expected: potential(0), read: pointOf('centre', 'a') },
      ...radii.flatMap((r): Figure[] => [
        { quantity: `A at ${mm(r)} mm, Wb/m`, expected: potential(r), read: pointOf(`r ${mm(r)}`, 'a') },
        { quantity: `B at ${mm(r)} mm, T`, expected: flux(r), read: magnitudeAt(`r ${mm(r)}`), bound: POINT },
      ]),
      { quantity: 'inductance by linkage, H/m', expected: inductance, read: scaled(linkageOf('wire'), 1 / current) },
      { quantity: 'inductance by energy, H/m', expected: inductance, read: scaled(energyOf, 2 / current ** 2) },
    ],
  };
}

/** B at a point may be off by this share of the case's typical field: the accuracy does not bind points. */
export const POINT = 1e-2;

/** Wanted of cases with forces: these are far better than their estimates, so that finer meshes prove nothing. */
export const FORCE = 3e-3;
/** What is held of a force. */
export const FORCE_BOUND = 1e-3;

/** Inner conductor of radius a, shell from b to c, equal currents, opposite ways. */
export function coaxialLine(): VerificationCase {
  const [a, b, c, rim, current] = [0.003, 0.008, 0.01, 0.014, 50];
  // The shell's share: (mu0/(2 pi)) integral from b to c of ((c^2 - r^2)/(c^2 - b^2))^2 dr/r.
  const q = (c * c) / (c * c - b * b);
  const shell = q * q * Math.log(c / b) - q + (c * c + b * b) / (4 * (c * c - b * b));
  const inductance = (MU0 / (2 * Math.PI)) * (0.25 + Math.log(b / a) + shell);
  const between = 0.005;
  return {
    name: 'coaxial line',
    formula:
      'L = mu0/(2 pi) (1/4 + ln(b/a) + q^2 ln(c/b) - q + (c^2 + b^2)/(4 (c^2 - b^2))), q = c^2/(c^2 - b^2); B = 0 outside',
    source: `Ampere's law, uniform currents; ${TEXTBOOK}`,
    section: roundSection(rim, 'air', [disc('shell', c), disc('insulation', b), disc('core', a)]),
    setup: {
      materials: { core: AIR, insulation: AIR, shell: AIR, air: AIR },
      current: { core: current, shell: -current },
    },
    probes: [
      { kind: 'linkage', name: 'out', of: 'core', turns: 1 },
      { kind: 'linkage', name: 'back', of: 'shell', turns: -1 },
      { kind: 'point', name: 'between', at: [0, between] },
      { kind: 'point', name: 'outside', at: [0.012, 0] },
    ],
    accuracy: 1e-3,
    figures: [
      {
        quantity: 'inductance by linkage, H/m',
        expected: inductance,
        read: scaled(summed(linkageOf('out'), linkageOf('back')), 1 / current),
      },
      { quantity: 'inductance by energy, H/m', expected: inductance, read: scaled(energyOf, 2 / current ** 2) },
      {
        quantity: `Bx at ${mm(between)} mm, T`,
        expected: (-MU0 * current) / (2 * Math.PI * between),
        read: pointOf('between', 'bx'),
        bound: POINT,
      },
      {
        quantity: 'B outside, T',
        expected: 0,
        scale: (MU0 * current) / (2 * Math.PI * between),
        read: magnitudeAt('outside'),
        bound: POINT,
      },
    ],
  };
}

/** Two round wires side by side; `space`: an exact potential held on a near circle, or unbounded air. */
export function twoWireLine(space: 'held' | 'open'): VerificationCase {
  const [a, distance, rim, current] = [0.002, 0.02, 0.03, 10];
  const places = [
    [-distance / 2, 0],
    [distance / 2, 0],
  ] as const;
  const potential = (x: number, y: number): number =>
    lineCurrent(current, places[0])(x, y) + lineCurrent(-current, places[1])(x, y);
  const inductance = twoWireInductance(a, distance);
  const force = parallelForce(current, -current, distance);
  const read = scaled(summed(linkageOf('out'), linkageOf('back')), 1 / current);
  const regions = [disc('out', a, places[0]), disc('back', a, places[1])];
  const energy: Figure = {
    quantity: 'inductance by energy, H/m',
    expected: inductance,
    read: scaled(energyOf, 2 / current ** 2),
    bound: FORCE_BOUND,
  };
  return {
    name: space === 'open' ? 'two-wire line in unbounded air' : 'two-wire line',
    formula: 'L = (mu0/pi) (ln(D/a) + 1/4); F = mu0 I1 I2/(2 pi D), unlike currents repel',
    source: `uniform round conductors act as line currents outside; ${TEXTBOOK}`,
    section: { ...roundSection(rim, 'air', regions), ...(space === 'open' ? { open: true } : {}) },
    setup: {
      materials: { out: AIR, back: AIR, air: AIR },
      current: { out: current, back: -current },
      ...(space === 'open' ? {} : { edges: { rim: held(potential) } }),
    },
    probes: [
      { kind: 'linkage', name: 'out', of: 'out', turns: 1 },
      { kind: 'linkage', name: 'back', of: 'back', turns: -1 },
      { kind: 'force', name: 'on out', on: ['out'] },
      { kind: 'force', name: 'on back', on: ['back'] },
    ],
    accuracy: FORCE,
    figures: [
      { quantity: 'inductance by linkage, H/m', expected: inductance, read, bound: FORCE_BOUND },
      ...(space === 'open' ? [energy] : []),
      { quantity: 'force on the left wire, N/m', expected: force, read: forceOf('on out', 'fx'), bound: FORCE_BOUND },
      {
        quantity: 'force on the right wire, N/m',
        expected: -force,
        read: forceOf('on back', 'fx'),
        bound: FORCE_BOUND,
      },
    ],
  };
}

/** (mu0/pi) (ln(D/a) + 1/4), H/m. */
const twoWireInductance = (a: number, distance: number): number => (MU0 / Math.PI) * (Math.log(distance / a) + 0.25);

/** mu0 I1 I2/(2 pi D), N/m: positive where the currents attract. */
const parallelForce = (one: number, other: number, distance: number): number =>
  (MU0 * one * other) / (2 * Math.PI * distance);

/** Like currents attract; they have no return within the section. */
export function likeWires(space: 'held' | 'open'): VerificationCase {
  const [a, distance, rim, current] = [0.002, 0.02, 0.03, 10];
  const potential = (x: number, y: number): number =>
    lineCurrent(current, [-distance / 2, 0])(x, y) + lineCurrent(current, [distance / 2, 0])(x, y);
  return {
    name: space === 'open' ? 'two like currents in unbounded air' : 'two like currents',
    formula: 'F = mu0 I1 I2/(2 pi D), like currents attract',
    source: `uniform round conductors act as line currents outside; ${TEXTBOOK}`,
    section: {
      ...roundSection(rim, 'air', [disc('left', a, [-distance / 2, 0]), disc('right', a, [distance / 2, 0])]),
      ...(space === 'open' ? { open: true } : {}),
    },
    setup: {
      materials: { left: AIR, right: AIR, air: AIR },
      current: { left: current, right: current },
      ...(space === 'open' ? {} : { edges: { rim: held(potential) } }),
    },
    probes: [{ kind: 'force', name: 'left', on: ['left'] }],
    accuracy: FORCE,
    figures: [
      {
        quantity: 'force on the left wire, N/m',
        expected: parallelForce(current, current, distance),
        read: forceOf('left', 'fx'),
        bound: FORCE_BOUND,
      },
    ],
  };
}

/** A wire above a half-space of relative permeability m, or above a wall that no flux enters. */
export function wireAbovePlane(plane: number | 'closed wall'): VerificationCase {
  const [a, height, half, current] = [0.002, 0.008, 0.03, 100];
  // The image's share of the current; in the half-space the field is that of 2 m/(m + 1) of the wire itself.
  const image = plane === 'closed wall' ? -1 : (plane - 1) / (plane + 1);
  const [wire, mirrored] = [
    lineCurrent(current, [0, height], height),
    lineCurrent(image * current, [0, -height], height),
  ];
  const above = (x: number, y: number): number => wire(x, y) + mirrored(x, y);
  const potential = (x: number, y: number): number => (y >= 0 ? above(x, y) : (1 + image) * wire(x, y));
  const floor = plane === 'closed wall' ? 0 : -half;
  const body: Material = { kind: 'linear', muR: plane === 'closed wall' ? 1 : plane };
  const force = (-MU0 * image * current ** 2) / (4 * Math.PI * height);
  const name = plane === 'closed wall' ? 'wire above a closed wall' : `wire above a half-space of mu_r ${plane}`;
  const linked = (MU0 / (2 * Math.PI)) * (0.25 + Math.log((2 * height) / a));
  return {
    name,
    formula:
      plane === 'closed wall'
        ? 'image -I: F = mu0 I^2/(4 pi d) upwards, L = mu0/(2 pi) (1/4 + ln(2 d/a))'
        : 'image k I, k = (m - 1)/(m + 1): F = mu0 k I^2/(4 pi d) downwards; field below as of (1 + k) I',
    source: `method of images; ${TEXTBOOK}`,
    section: rectangularSection([-half, floor], [half, half], 'air', [
      ...(plane === 'closed wall' ? [] : [box('body', [0, floor / 2], 2 * half, half)]),
      disc('wire', a, [0, height]),
    ]),
    setup: {
      materials: { air: AIR, wire: AIR, body },
      current: { wire: current },
      edges: {
        left: held(potential),
        right: held(potential),
        top: held(potential),
        bottom: plane === 'closed wall' ? { kind: 'closed' } : held(potential),
      },
    },
    probes: [
      { kind: 'force', name: 'wire', on: ['wire'] },
      { kind: 'linkage', name: 'wire', of: 'wire', turns: 1 },
    ],
    accuracy: FORCE,
    figures: [
      { quantity: 'force on the wire, N/m', expected: force, read: forceOf('wire', 'fy'), bound: FORCE_BOUND },
      ...(plane === 'closed wall'
        ? [
            {
              quantity: 'inductance, H/m',
              expected: linked,
              read: scaled(linkageOf('wire'), 1 / current),
              bound: FORCE_BOUND,
            },
          ]
        : []),
    ],
  };
}

/** A bar |x| <= w/2, |y| <= h/2 of uniform current density (A/m^2). */
interface Bar {
  readonly width: number;
  readonly height: number;
  readonly density: number;
}

/** Sum over the bar's corners of s F(u, v), u = x -+ w/2, v = y -+ h/2, s = +1 where both are shifted alike. */
function overCorners(bar: Bar, x: number, y: number, part: (u: number, v: number) => number): number {
  let sum = 0;
  for (const i of [1, -1]) {
    for (const j of [1, -1]) sum += i * j * part(x + (i * bar.width) / 2, y + (j * bar.height) / 2);
  }
  return sum;
}

/** (Bx, By) of a bar: G(u, v) = (u/2) ln(u^2 + v^2) + v atan(u/v) over its corners. */
export function barField(bar: Bar, x: number, y: number): readonly [bx: number, by: number] {
  const g = (u: number, v: number): number =>
    (u === 0 ? 0 : (u / 2) * Math.log(u * u + v * v)) + (v === 0 ? 0 : v * Math.atan(u / v));
  const factor = (MU0 * bar.density) / (2 * Math.PI);
  return [-factor * overCorners(bar, x, y, g), factor * overCorners(bar, x, y, (u, v) => g(v, u))];
}

/** A of a bar: the logarithm of a line current integrated over it. */
export function barPotential(bar: Bar, x: number, y: number): number {
  const f = (u: number, v: number): number => {
    const turned = (p: number, q: number): number => (p === 0 ? 0 : p * p * Math.atan(q / p));
    return (u * v === 0 ? 0 : u * v * Math.log(u * u + v * v)) - 3 * u * v + turned(u, v) + turned(v, u);
  };
  return ((-MU0 * bar.density) / (4 * Math.PI)) * overCorners(bar, x, y, f);
}

export function busbar(space: 'held' | 'open'): VerificationCase {
  const [width, height, current] = [0.01, 0.04, 400];
  const bar: Bar = { width, height, density: current / (width * height) };
  const places: readonly Point[] = [
    [0.01, 0],
    [0.005, 0],
    [0, 0.03],
    [0.02, 0.025],
    [0.002, 0.01],
    ...(space === 'open' ? [[0.5, 0] as const] : []),
  ];
  const nameOf = ([x, y]: Point): string => `(${mm(x)}, ${mm(y)}) mm`;
  const typical = barField(bar, 0.01, 0)[1];
  const section = rectangularSection([-0.03, -0.04], [0.03, 0.04], 'air', [box('bar', [0, 0], width, height)]);
  return {
    name: space === 'open' ? 'busbar in unbounded air' : 'busbar',
    formula: 'B = mu0 J/(2 pi) sum over corners of G(u, v) = (u/2) ln(u^2 + v^2) + v atan(u/v)',
    source: 'line currents integrated over the bar; computed here, checked by 160 000 filaments',
    section: { ...section, ...(space === 'open' ? { open: true } : {}) },
    setup: {
      materials: { bar: AIR, air: AIR },
      current: { bar: current },
      ...(space === 'open' ? {} : { edges: allSides(held((x, y) => barPotential(bar, x, y))) }),
    },
    probes: places.map((at): Probe => ({ kind: 'point', name: nameOf(at), at })),
    accuracy: 1e-4,
    figures: places.flatMap((at) => {
      const field = barField(bar, ...at);
      return ([0, 1] as const).flatMap((i): Figure[] => {
        if (Math.abs(field[i]) < 1e-12) return [];
        const scale = Math.min(typical, Math.hypot(...field));
        const component = i === 0 ? 'Bx' : 'By';
        const read = pointOf(nameOf(at), i === 0 ? 'bx' : 'by');
        // On the bar's face the slope of B jumps, which no smooth recovery follows.
        const bound = at[0] === width / 2 ? 0.05 : POINT;
        return [{ quantity: `${component} at ${nameOf(at)}, T`, expected: field[i], scale, read, bound }];
      });
    }),
  };
}

/**
 * A slab of current that spans a strip without end, flux held on both sides of it: the field along x jumps by mu0 K, and
 * J x B over the slab is the difference of the pressures B^2/(2 mu0).
 */
export function currentSlab(): VerificationCase {
  const [width, below, thick, above] = [0.02, 0.01, 0.004, 0.012];
  const [b1, b2] = [0.5, 0.3]; // Bx under and over the slab, T
  const density = (b1 - b2) / (MU0 * thick); // curl B = mu0 J: Bx falls with y where J is out of the page
  const top = below + thick + above;
  const flux = below * b1 + (thick * (b1 + b2)) / 2 + above * b2;
  const force = (width * (b1 ** 2 - b2 ** 2)) / (2 * MU0);
  return {
    name: 'slab of current between two fluxes',
    formula: 'F = W (B1^2 - B2^2)/(2 mu0)',
    source: 'magnetic pressure; any electromagnetics text; number computed here',
    section: {
      ...rectangularSection([0, 0], [width, top], 'air', [box('slab', [width / 2, below + thick / 2], width, thick)]),
      matched: [['left', 'right']],
    },
    setup: {
      materials: { air: AIR, slab: AIR },
      currentDensity: { slab: density },
      edges: {
        left: { kind: 'repeating' },
        right: { kind: 'repeating' },
        bottom: { kind: 'closed' },
        top: held(() => flux),
      },
    },
    probes: [
      { kind: 'force', name: 'slab', on: ['slab'] },
      { kind: 'point', name: 'under', at: [width / 3, below / 2] },
    ],
    accuracy: 1e-3,
    figures: [
      { quantity: 'force on the slab, N/m', expected: force, read: forceOf('slab', 'fy') },
      { quantity: 'B under it, T', expected: b1, read: pointOf('under', 'bx') },
    ],
  };
}
