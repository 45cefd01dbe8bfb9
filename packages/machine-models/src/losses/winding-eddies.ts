import type { Machine, Warning } from '../machine.js';
import { copperResistivity } from '../winding/copper.js';
import { legConductor } from './leg-conductor.js';
import type { Strand } from './strand-loss.js';
import { skinDepth, strandLossDensity, strandOf, strandSize } from './strand-loss.js';
import type { WaveSquares, WindingField } from './winding-field.js';
import { waveSquares } from './winding-field.js';

/** Where the winding's eddies are wanted. */
export interface EddyState {
  readonly speedRpm: number;
  /** Of the copper, degC. */
  readonly temperature: number;
  /** Loss in three dimensions over that of the slices (`endShare`); 1 where absent. */
  readonly endShare?: number;
}

/** Eddy loss in the strands of the whole winding by the magnets' field, the same at every load. */
export interface WindingEddies {
  /** W. */
  readonly loss: number;
  /** Of the slices alone, before the share of the ends, W. */
  readonly slicesLoss: number;
  /** Share of the loss by the field along the circumference. */
  readonly tangentialShare: number;
  /** Share of the loss by orders above the fundamental. */
  readonly harmonicShare: number;
  /** Braking torque, Nm. */
  readonly torque: number;
  /** Conductor between the magnets' inner and outer radius in all legs, strands in hand counted once, m. */
  readonly lengthInField: number;
  /** Strand's size (rectangular: its longer side) over the skin depth of the fundamental. */
  readonly sizeOverSkinDepth: number;
  readonly warnings: readonly Warning[];
}

/**
 * Eddy loss of the strands. The copper in the field is what the slices take for the legs: of all turns of all coils, two
 * legs prolonged over the magnets' whole radial length (`legConductor`); the end turns, and what the field loses
 * towards the magnets' ends, come in by `endShare`. Hot copper resists more, so the loss falls as it warms.
 *
 * @param fields of all slices; their weights integrate over the magnets' radial length
 */
export function windingEddies(machine: Machine, fields: readonly WindingField[], state: EddyState): WindingEddies {
  const { rotor, winding } = machine;
  const { speedRpm, temperature, endShare = 1 } = state;
  const omega = (2 * Math.PI * speedRpm) / 60;
  const w = (omega * rotor.poles) / 2;
  const resistivity = copperResistivity(temperature);
  const strand = strandOf(winding.wire);
  const squares = fields.map(waveSquares);
  const lossOf = (part: (squares: WaveSquares) => WaveSquares): number =>
    copperInField(machine, fields, (i) => strandLossDensity(strand, part(squares[i]), w, resistivity));
  const slicesLoss = lossOf((all) => all);
  const share = (part: number): number => (slicesLoss === 0 ? 0 : part / slicesLoss);
  const sizeOverSkinDepth = w === 0 ? 0 : strandSize(strand) / skinDepth(w, resistivity);
  return {
    loss: slicesLoss * endShare,
    slicesLoss,
    tangentialShare: share(lossOf((all) => ({ ...all, axial: all.axial.map(() => 0) }))),
    harmonicShare: share(lossOf(aboveFundamental)),
    torque: omega === 0 ? 0 : (slicesLoss * endShare) / omega,
    lengthInField: copperInField(machine, fields, () => 1) / (winding.wire.strands * winding.wire.strandArea),
    sizeOverSkinDepth,
    warnings: warningsOf(strand, sizeOverSkinDepth),
  };
}

/** Integral of a loss per volume (W/m^3, by the number of the slice) over the copper in the field, W. */
export function copperInField(
  machine: Pick<Machine, 'winding' | 'rotor'>,
  fields: readonly WindingField[],
  densityOf: (slice: number) => number,
): number {
  const { coils, turns, wire } = machine.winding;
  const section = coils * turns * wire.strands * wire.strandArea;
  return fields.reduce(
    (sum, { radius, weight }, i) => sum + weight * section * legConductor(machine, radius) * densityOf(i),
    0,
  );
}

const aboveFundamental = ({ order, axial, tangential }: WaveSquares): WaveSquares => {
  const above = (values: readonly number[]): readonly number[] =>
    values.map((value, i) => (order[i] === 1 ? 0 : value));
  return { order, axial: above(axial), tangential: above(tangential) };
};

/** Beyond one skin depth the simple law is off by more than a few per cent. */
function warningsOf(strand: Strand, sizeOverSkinDepth: number): readonly Warning[] {
  if (sizeOverSkinDepth <= 1) return [];
  const depths = `${sizeOverSkinDepth.toFixed(1)} skin depths at the fundamental frequency`;
  const text =
    strand.kind === 'round'
      ? `the strand is ${depths} thick: its eddy loss takes its own field into account, not that of its neighbours; thinner ` +
        'strands lose far less'
      : `the strand's longer side is ${depths}: the eddies' own field is left out, so its loss is overstated; several thinner ` +
        'strands lose far less';
  return [{ key: 'winding.wire', text }];
}
