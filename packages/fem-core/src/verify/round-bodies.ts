import { MU0 } from '../base/constants.js';
import { FORCE, FORCE_BOUND, lineCurrent, POINT } from './conductors.js';
import { AIR, disc, held, roundSection } from './drawing.js';
import { fluxOf, forceOf, magnitudeAt, meanOf, pointOf } from './readings.js';
import type { VerificationCase } from './verification-case.js';

const TEXTBOOK = 'any electromagnetics text; number computed here';
const SEPARATED = `separation of variables in the plane; ${TEXTBOOK}`;

/** Mean B within a cylinder of relative permeability m in a uniform field. */
const insideCylinder = (m: number, b0: number): number => (2 * m * b0) / (m + 1);

/** A solid cylinder of relative permeability m in a uniform field along x. */
export function permeableCylinder(m: number): VerificationCase {
  const [b0, radius, rim] = [0.1, 0.01, 0.025];
  const k = (m - 1) / (m + 1);
  const potential = (x: number, y: number): number => b0 * y * (1 + (k * radius ** 2) / (x * x + y * y));
  return {
    name: `cylinder of mu_r ${m} in a uniform field`,
    formula: 'B = 2 m B0/(m + 1) inside; B0 (1 +- k R^2/r^2), k = (m - 1)/(m + 1), on and across the axis',
    source: SEPARATED,
    section: roundSection(rim, 'air', [disc('cylinder', radius)]),
    setup: {
      materials: { cylinder: { kind: 'linear', muR: m }, air: AIR },
      edges: { rim: held(potential) },
    },
    probes: [
      { kind: 'mean', name: 'inside', over: ['cylinder'] },
      { kind: 'point', name: 'on', at: [2 * radius, 0] },
      { kind: 'point', name: 'across', at: [0, 2 * radius] },
    ],
    accuracy: 1e-3,
    figures: [
      { quantity: 'B inside, T', expected: insideCylinder(m, b0), read: meanOf('inside', 'bx') },
      { quantity: 'B at 2 R on the axis, T', expected: b0 * (1 + k / 4), read: pointOf('on', 'bx'), bound: POINT },
      { quantity: 'B at 2 R across it, T', expected: b0 * (1 - k / 4), read: pointOf('across', 'bx'), bound: POINT },
    ],
  };
}

/** B left in the hole of a shell of relative permeability m, radii a and b, T. */
const insideShell = (m: number, a: number, b: number, b0: number): number =>
  (4 * m * b0) / ((m + 1) ** 2 - ((m - 1) * (a / b)) ** 2);

/** A shell of relative permeability m in a uniform field along x. */
export function permeableShell(m: number): VerificationCase {
  const [b0, a, b, rim] = [0.1, 0.04, 0.05, 0.1];
  // Outside A = y (b0 + d/r^2); the dipole d follows from continuity of A and H at both faces.
  const d = (b0 * b * b * (m * m - 1) * (1 - (a / b) ** 2)) / ((m + 1) ** 2 - ((m - 1) * (a / b)) ** 2);
  const potential = (x: number, y: number): number => y * (b0 + d / (x * x + y * y));
  return {
    name: `shell of mu_r ${m} in a uniform field`,
    formula: 'B = 4 m B0/((m + 1)^2 - (m - 1)^2 a^2/b^2) in the hole',
    source: SEPARATED,
    section: roundSection(rim, 'air', [disc('shell', b), disc('hole', a)]),
    setup: {
      materials: { shell: { kind: 'linear', muR: m }, hole: AIR, air: AIR },
      edges: { rim: held(potential) },
    },
    probes: [
      { kind: 'mean', name: 'hole', over: ['hole'] },
      { kind: 'flux', name: 'shell', from: [0, -b], to: [0, b] },
    ],
    accuracy: 1e-3,
    figures: [
      { quantity: 'B in the hole, T', expected: insideShell(m, a, b, b0), read: meanOf('hole', 'bx') },
      { quantity: 'flux through hole and shell, Wb/m', expected: -2 * (b * b0 + d / b), read: fluxOf('shell') },
    ],
  };
}

/** A cylinder magnetised along x, nothing else. */
export function magnetisedCylinder(recoil: number): VerificationCase {
  const [remanence, radius, rim] = [1.2, 0.01, 0.03];
  const own = remanence / (1 + recoil);
  return {
    name: `magnetised cylinder in air, recoil ${recoil}`,
    formula: 'B = Br/(1 + m) inside, the dipole B R^2/r^2 outside',
    source: `uniformly magnetised cylinder; ${TEXTBOOK}`,
    section: roundSection(rim, 'air', [disc('magnet', radius)]),
    setup: {
      materials: { magnet: { kind: 'magnet', recoil, remanence: [remanence, 0] }, air: AIR },
      edges: { rim: held((x, y) => (own * radius ** 2 * y) / (x * x + y * y)) },
    },
    probes: [
      { kind: 'mean', name: 'inside', over: ['magnet'] },
      { kind: 'point', name: 'on', at: [2 * radius, 0] },
    ],
    accuracy: 1e-3,
    figures: [
      { quantity: 'B inside, T', expected: own, read: meanOf('inside', 'bx') },
      { quantity: 'B at 2 R on the axis, T', expected: own / 4, read: pointOf('on', 'bx'), scale: own, bound: POINT },
    ],
  };
}

/** A cylinder magnetised across a uniform field along x, and carrying a current: force and torque. */
export function cylinderInField(): VerificationCase {
  const [remanence, recoil, radius, rim, b0, current, degrees] = [1.2, 1.05, 0.01, 0.03, 0.1, 5e4, 60];
  const angle = (degrees * Math.PI) / 180;
  const own = remanence / (1 + recoil);
  const k = (recoil - 1) / (recoil + 1);
  // Uniform field and the dipole it induces, the dipole of the remanence, the current.
  const ofCurrent = lineCurrent(current, [0, 0], rim);
  const potential = (x: number, y: number): number => {
    const share = radius ** 2 / (x * x + y * y);
    const dipole = own * share * (Math.cos(angle) * y - Math.sin(angle) * x);
    return b0 * y * (1 + k * share) + dipole + ofCurrent(x, y);
  };
  const torque = ((-2 * Math.PI * radius ** 2) / MU0) * own * b0 * Math.sin(angle);
  return {
    name: 'magnetised cylinder with a current in a uniform field',
    formula: 'torque = m x B0, m = (2 pi R^2/mu0) Br/(1 + m_recoil) along the magnetisation; F = I B0 across the field',
    source: `dipole and line current in a uniform field; ${TEXTBOOK}`,
    section: roundSection(rim, 'air', [disc('magnet', radius)]),
    setup: {
      materials: {
        magnet: {
          kind: 'magnet',
          recoil,
          remanence: [remanence * Math.cos(angle), remanence * Math.sin(angle)],
        },
        air: AIR,
      },
      current: { magnet: current },
      edges: { rim: held(potential) },
    },
    probes: [
      { kind: 'force', name: 'magnet', on: ['magnet'] },
      { kind: 'mean', name: 'inside', over: ['magnet'] },
    ],
    accuracy: FORCE,
    figures: [
      {
        quantity: 'force across the field, N/m',
        expected: current * b0,
        read: forceOf('magnet', 'fy'),
        bound: FORCE_BOUND,
      },
      { quantity: 'torque, N m/m', expected: torque, read: forceOf('magnet', 'torque'), bound: FORCE_BOUND },
      {
        quantity: 'mean By inside, T',
        expected: own * Math.sin(angle),
        read: meanOf('inside', 'by'),
        bound: POINT,
      },
    ],
  };
}

/** A tube magnetised along circles round a conductor: no pole anywhere, H is that of the current alone. */
export function ringMagnet(): VerificationCase {
  const [wire, inner, outer, rim, remanence, recoil, current] = [0.004, 0.01, 0.02, 0.025, 1.1, 1.05, 5000];
  const density = (r: number): number => (MU0 * current) / (2 * Math.PI * r);
  const flux = remanence * (outer - inner) + recoil * inner * density(inner) * Math.log(outer / inner);
  return {
    name: 'tube magnetised along circles round a current',
    formula: 'B = Br + mu0 m I/(2 pi r) in the tube, mu0 I/(2 pi r) outside',
    source: "Ampere's law, no free pole anywhere; computed here",
    section: roundSection(rim, 'air', [disc('tube', outer), disc('bore', inner), disc('wire', wire)]),
    setup: {
      materials: {
        air: AIR,
        bore: AIR,
        wire: AIR,
        tube: { kind: 'directed-magnet', direction: { angle: Math.PI / 2, turns: 1 }, recoil, along: remanence },
      },
      current: { wire: current },
    },
    probes: [
      { kind: 'flux', name: 'tube', from: [inner, 0], to: [outer, 0] },
      { kind: 'mean', name: 'tube', over: ['tube'] },
      { kind: 'point', name: 'bore', at: [0.007, 0] },
    ],
    accuracy: 1e-3,
    figures: [
      { quantity: 'flux, Wb/m', expected: flux, read: fluxOf('tube') },
      {
        quantity: 'mean |B| of the tube, T',
        expected: remanence + (2 * recoil * density(1)) / (inner + outer),
        read: meanOf('tube', 'b'),
      },
      {
        quantity: 'B in the bore, T',
        expected: density(0.007),
        scale: remanence,
        read: magnitudeAt('bore'),
        bound: POINT,
      },
    ],
  };
}

/** A tube whose magnetisation turns twice as fast as the radius: a uniform field in the bore, none outside. */
export function halbachCylinder(): VerificationCase {
  const [inner, outer, rim, remanence] = [0.01, 0.02, 0.03, 1.2];
  return {
    name: 'Halbach cylinder',
    formula: 'B = Br ln(r2/r1), uniform, in the bore; none outside (recoil 1)',
    source: 'Halbach, Nucl. Instrum. Methods 169, 1980 (title from memory); number computed here',
    section: roundSection(rim, 'air', [disc('tube', outer), disc('bore', inner)]),
    setup: {
      materials: {
        air: AIR,
        bore: AIR,
        tube: { kind: 'directed-magnet', direction: { angle: 0, turns: 2 }, recoil: 1, along: remanence },
      },
    },
    probes: [
      { kind: 'mean', name: 'bore', over: ['bore'] },
      { kind: 'point', name: 'bore', at: [0.4 * inner, 0.3 * inner] },
      { kind: 'point', name: 'outside', at: [0, 1.2 * outer] },
    ],
    accuracy: 1e-3,
    figures: [
      { quantity: 'mean B in the bore, T', expected: remanence * Math.log(outer / inner), read: meanOf('bore', 'bx') },
      {
        quantity: 'B in the bore off its centre, T',
        expected: remanence * Math.log(outer / inner),
        read: pointOf('bore', 'bx'),
        bound: POINT,
      },
      { quantity: 'B outside, T', expected: 0, scale: remanence, read: magnitudeAt('outside'), bound: POINT },
    ],
  };
}
