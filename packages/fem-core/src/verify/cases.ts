import { magnetAndGap, magnetGapAndIron, magnetGapAndSteel, magnetPastItsKnee } from './circuits.js';
import {
  busbar,
  coaxialLine,
  currentSlab,
  likeWires,
  roundConductor,
  twoWireLine,
  wireAbovePlane,
} from './conductors.js';
import { discGap, G1, G2, G3, G4, pullOnDisc } from './double-disc.js';
import { blockHalbach, turningHalbach } from './halbach.js';
import { blockMagnet, facingMagnets, magnetPairBetweenPlates } from './magnets-in-air.js';
import {
  cylinderInField,
  halbachCylinder,
  magnetisedCylinder,
  permeableCylinder,
  permeableShell,
  ringMagnet,
} from './round-bodies.js';
import { radialFlux, saturableRing, stackedSlab } from './saturable.js';
import { slotOppositeSmoothFace } from './slots.js';
import type { VerificationCase } from './verification-case.js';

export const conductorCases = (): readonly VerificationCase[] => [
  roundConductor(),
  coaxialLine(),
  twoWireLine('held'),
  twoWireLine('open'),
  likeWires('held'),
  likeWires('open'),
  busbar('held'),
  busbar('open'),
  wireAbovePlane(5),
  wireAbovePlane('closed wall'),
  currentSlab(),
];

export const bodyCases = (): readonly VerificationCase[] => [
  permeableCylinder(1.05),
  permeableCylinder(10),
  permeableCylinder(1000),
  permeableShell(100),
  permeableShell(1000),
  magnetisedCylinder(1.05),
  cylinderInField(),
  ringMagnet(),
  halbachCylinder(),
];

export const magnetCases = (): readonly VerificationCase[] => [
  blockMagnet('held'),
  blockMagnet('open'),
  facingMagnets('held', 'field'),
  facingMagnets('held', 'pull'),
  facingMagnets('open', 'field'),
  facingMagnets('open', 'pull'),
  magnetPairBetweenPlates(),
  turningHalbach(),
  blockHalbach(),
];

export const gapCases = (): readonly VerificationCase[] => [
  slotOppositeSmoothFace(0.003, 0.001, 0.012),
  slotOppositeSmoothFace(0.008, 0.001, 0.02),
  discGap('G1', G1),
  discGap('G2', G2),
  discGap('G3, ferrite', G3),
  discGap('G4, plain disc', G4),
  pullOnDisc('G1', G1),
  pullOnDisc('G4', G4),
];

export const circuitCases = (): readonly VerificationCase[] => [
  magnetAndGap(1.25, 1.05, 0.02, 0.016),
  magnetAndGap(0.39, 1.1, 0.04, 0.014),
  magnetGapAndIron(),
];

/** Materials whose permeability depends on the field. */
export const saturationCases = (): readonly VerificationCase[] => [
  saturableRing(20),
  saturableRing(200),
  saturableRing(2000),
  radialFlux(),
  stackedSlab(),
  magnetGapAndSteel(),
  magnetPastItsKnee(),
];

/** Every case, in the order of the table. */
export const verificationCases = (): readonly VerificationCase[] => [
  ...conductorCases(),
  ...bodyCases(),
  ...magnetCases(),
  ...gapCases(),
  ...circuitCases(),
  ...saturationCases(),
];
