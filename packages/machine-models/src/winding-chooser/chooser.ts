import type { Machine, Wire } from '../machine.js';
import { fillFactor, phaseResistance } from '../winding/turn.js';
import type { LegSection } from './packing.js';
import { narrowestLeg, wiresInLayers } from './packing.js';
import type { Enamel, WireSize } from './wire-sizes.js';
import { overallDiameter, WIRE_SIZES } from './wire-sizes.js';

/** Open-circuit voltages of the machine with its own turns, at one speed, V. */
export interface OpenVoltages {
  readonly speedRpm: number;
  readonly phaseRms: number;
  readonly lineRms: number;
  readonly rectifiedMean: number;
  /** Highest between any two terminals: what a bridge's bus sees first. */
  readonly linePeak: number;
}

/** Which open-circuit voltage is wanted, how much of it, and at what speed. */
export interface WantedVoltage {
  readonly measure: 'phaseRms' | 'lineRms' | 'rectifiedMean' | 'linePeak';
  readonly voltage: number;
  readonly speedRpm: number;
}

export interface ChooserInput {
  readonly machine: Machine;
  readonly open: OpenVoltages;
  /** Where absent: the machine's own rectified mean at its own speed, that is turns about its own. */
  readonly wanted?: WantedVoltage;
  /** Phase current the loss is told at, rms, A; where absent no loss is told. */
  readonly ratedCurrent?: number;
  /** Strand eddy loss of the machine as it is, at its speed, W; only where its wire is round. */
  readonly strandEddy?: number;
  /** Most bare copper over the leg's section at its narrowest; 0.5 where absent. */
  readonly reachableFill?: number;
  /**
   * Numbers of strands in hand to look at. Where absent: 1 to 6, the machine's own, and about as many of its own strands as fill
   * the leg.
   */
  readonly strands?: readonly number[];
}

/** A wire for a number of turns. */
export interface WireChoice {
  readonly size: WireSize;
  readonly strands: number;
  /** Bare copper over leg width x thickness. */
  readonly fill: number;
  /** Of a phase, ohm, at 20 degC and at the winding's temperature. */
  readonly resistance20: number;
  readonly resistanceHot: number;
  /** Ohmic loss of all phases at the rated current, hot, W. */
  readonly copperLoss?: number;
  /** Strand eddy loss at the operating speed, W. */
  readonly strandEddy?: number;
}

/** A whole number of turns. */
export interface TurnsOption {
  readonly turns: number;
  /** At the wanted speed, V. */
  readonly open: OpenVoltages;
  /** Wanted measure over what was wanted, less 1. */
  readonly off: number;
  /** Where the highest line voltage, load open, reaches the bus and two diodes, rpm; absent without a bridge on a bus. */
  readonly cutInRpm?: number;
  /** For each number of strands that fits, the thickest metric size and the thickest gauge; fewest strands first. */
  readonly wires: readonly WireChoice[];
  /** The least loss where it is known, else the least resistance of those no thicker than the machine's own strand. */
  readonly suggested?: WireChoice;
}

export interface WindingChoice {
  readonly wanted: WantedVoltage;
  /** Turns that would give the wanted voltage exactly. */
  readonly exactTurns: number;
  readonly options: readonly TurnsOption[];
  /** Method, and what was taken. */
  readonly notes: readonly string[];
}

/** Bare copper over the leg's section that careful hand winding reaches with round wire; 0.40 to 0.55 are common practice. */
const REACHABLE_FILL = 0.5;
/** Whole turns told to either side of the nearest. */
const EITHER_SIDE = 3;
const USUAL_STRANDS = [1, 2, 3, 4, 5, 6];

/**
 * Whole-turn options for a wanted open-circuit voltage, and for each the wires sold that fit.
 *
 * In one and the same leg every turn sees the same flux, so voltages go as the turns and as the speed, and with them
 *
 *   turns = own turns x wanted voltage / (own voltage at the wanted speed).
 *
 * Wires fit where their bare copper fills no more of the leg's narrowest section than is reachable, and their overall diameters
 * go side by side into it in whole layers. The mean turn stays: R as `phaseResistance`. Strand eddy loss goes as
 * turns x strands x d^4 (the strand far thinner than the skin depth).
 */
export function chooseWinding(input: ChooserInput): WindingChoice {
  const { machine, open } = input;
  const own = machine.winding.turns;
  const wanted = input.wanted ?? { measure: 'rectifiedMean', voltage: open.rectifiedMean, speedRpm: open.speedRpm };
  const perTurn = (open[wanted.measure] * wanted.speedRpm) / (open.speedRpm * own);
  const exactTurns = wanted.voltage / perTurn;
  const nearest = Math.max(1, Math.round(exactTurns));
  const counts = Array.from({ length: 2 * EITHER_SIDE + 1 }, (_, i) => nearest - EITHER_SIDE + i).filter((n) => n >= 1);
  return {
    wanted,
    exactTurns,
    options: Number.isFinite(exactTurns) ? counts.map((turns) => describeTurns(input, wanted, turns)) : [],
    notes: [
      `wires fill at most ${input.reachableFill ?? REACHABLE_FILL} of the leg with bare copper and go in whole layers with enamel of ` +
        `${enamelOf(machine)}, largest overall diameter of IEC 60317-0-1`,
      'every option keeps the leg, so the flux of a turn and its length',
    ],
  };
}

function describeTurns(input: ChooserInput, wanted: WantedVoltage, turns: number): TurnsOption {
  const { machine, open } = input;
  const scale = (turns / machine.winding.turns) * (wanted.speedRpm / open.speedRpm);
  const scaled: OpenVoltages = {
    speedRpm: wanted.speedRpm,
    phaseRms: scale * open.phaseRms,
    lineRms: scale * open.lineRms,
    rectifiedMean: scale * open.rectifiedMean,
    linePeak: scale * open.linePeak,
  };
  const threshold = busThreshold(machine);
  const wires = fittingWires(input, turns);
  const suggested = suggest(machine, wires);
  return {
    turns,
    open: scaled,
    off: scaled[wanted.measure] / wanted.voltage - 1,
    ...(threshold !== undefined && { cutInRpm: (wanted.speedRpm * threshold) / scaled.linePeak }),
    wires,
    ...(suggested !== undefined && { suggested }),
  };
}

/** Bus voltage and two diode drops, V. */
function busThreshold({ operation: { load } }: Machine): number | undefined {
  return load?.kind === 'bridge' && 'voltage' in load ? load.voltage + 2 * load.diodeDrop : undefined;
}

function fittingWires(input: ChooserInput, turns: number): readonly WireChoice[] {
  const { machine, reachableFill = REACHABLE_FILL } = input;
  const leg = narrowestLeg(machine);
  const counts = new Set(input.strands ?? usualCounts(machine, leg, turns, reachableFill));
  const choices: WireChoice[] = [];
  for (const strands of [...counts].sort((a, b) => a - b)) {
    for (const standard of ['metric', 'AWG'] as const) {
      const fits = (size: WireSize): boolean =>
        size.standard === standard && goesIn(size, turns * strands, leg, enamelOf(machine), reachableFill);
      const size = WIRE_SIZES.find(fits); // thickest first
      if (size !== undefined) choices.push(describeWire(input, turns, size, strands));
    }
  }
  return choices;
}

/** A machine wound with many thin strands is offered many: as many of its own as fill the leg, and one more or fewer. */
function usualCounts({ winding: { wire } }: Machine, leg: LegSection, turns: number, fill: number): readonly number[] {
  const many = Math.floor((fill * leg.width * leg.thickness) / (turns * wire.strandArea));
  return [...USUAL_STRANDS, wire.strands, many - 1, many, many + 1].filter((count) => count >= 1);
}

function goesIn(size: WireSize, wires: number, leg: LegSection, enamel: Enamel, reachableFill: number): boolean {
  const fill = (wires * areaOf(size)) / (leg.width * leg.thickness);
  return fill <= reachableFill && wiresInLayers(overallDiameter(size, enamel), leg) >= wires;
}

function describeWire(input: ChooserInput, turns: number, size: WireSize, strands: number): WireChoice {
  const { machine, ratedCurrent, strandEddy } = input;
  const { poles } = machine.rotor;
  const wire: Wire = { strandArea: areaOf(size), strands, diameter: size.diameter };
  const winding = { ...machine.winding, turns, wire };
  const resistanceHot = phaseResistance(winding, poles, winding.temperature);
  const own = machine.winding;
  return {
    size,
    strands,
    fill: fillFactor(winding),
    resistance20: phaseResistance(winding, poles, 20),
    resistanceHot,
    ...(ratedCurrent !== undefined && { copperLoss: winding.phases * ratedCurrent ** 2 * resistanceHot }),
    ...(strandEddy !== undefined &&
      own.wire.diameter !== undefined && {
        strandEddy:
          (strandEddy * turns * strands * size.diameter ** 4) / (own.turns * own.wire.strands * own.wire.diameter ** 4),
      }),
  };
}

/**
 * The wire with the least loss, ohmic at the rated current and eddy together, where both are known; else the least resistance
 * among those no thicker than the machine's own strand, whose eddy loss its designer has accepted. Equal ones: the fewest
 * strands.
 */
function suggest(machine: Machine, wires: readonly WireChoice[]): WireChoice | undefined {
  const thickest = machine.winding.wire.diameter ?? Infinity;
  const lossOf = ({ copperLoss, strandEddy }: WireChoice): number | undefined =>
    copperLoss === undefined || strandEddy === undefined ? undefined : copperLoss + strandEddy;
  const worth = (wire: WireChoice): number => lossOf(wire) ?? wire.resistanceHot;
  const allowed = wires.filter((wire) => lossOf(wire) !== undefined || wire.size.diameter <= thickest * (1 + 1e-9));
  return allowed.reduce<WireChoice | undefined>(
    (best, wire) => (best === undefined || worth(wire) < worth(best) ? wire : best),
    undefined,
  );
}

const areaOf = ({ diameter }: WireSize): number => (Math.PI / 4) * diameter ** 2;

/** Grade 2 where the machine does not say. */
function enamelOf({ winding }: Machine): Enamel {
  const { enamel } = winding.wire;
  return enamel === 'grade 1' || enamel === 'grade 3' ? enamel : 'grade 2';
}
