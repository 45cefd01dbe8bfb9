import { figure, shortCircuitCaution, TOUCH_VOLTAGE } from '../faults/fault-notes.js';
import type { Machine } from '../machine.js';
import { remanenceAt } from '../materials/at-temperature.js';
import { magnetLength, magnetReach } from '../rotor/magnet-shape.js';
import type { EmfResult, MachineResult, WindingResult } from './result.js';
import type { Service } from './service.js';

/** What the cautions look at, beside the machine. */
export interface CautionFigures {
  readonly emf: EmfResult;
  readonly winding: WindingResult;
  readonly mechanical: Pick<MachineResult['mechanical'], 'disc_pull_N'>;
  /** Highest rectified voltage with the load open at the operating speed, V. */
  readonly openPeak: number;
  /** Rms EMF per phase that drives current round a closed delta, V; see `circulatingEmf`. */
  readonly circulatingEmf: number;
  readonly service: Service;
}

/** m/s^2, to tell a force in kgf. */
const STANDARD_GRAVITY = 9.80665;

/** Metal above this burns the skin that touches it, degC; from memory. */
const TOUCH_TEMPERATURE = 60;

/** Magnets longer than this (m) crush by themselves, and a pull above this (N) does; common practice. */
const CRUSHING_LENGTH = 0.02;
const CRUSHING_PULL = 50;

/** Cautions that the machine's own figures call for, each with its figure; the last one is general. */
export function findCautions(machine: Machine, figures: CautionFigures): readonly string[] {
  return [
    crushing(machine, figures.mechanical.disc_pull_N),
    shock(machine, figures.openPeak),
    flyingParts(machine),
    heat(machine),
    circulation(machine, figures),
    shorted(figures.service),
    'A preliminary design aid, not a certification: local electrical codes and licensed persons decide on whatever is ' +
      'connected to a building, a boat, a vehicle or a network.',
  ].filter((text) => text !== undefined);
}

function crushing({ rotor }: Machine, pull: number): string | undefined {
  const { magnets } = rotor;
  if (magnetLength(magnets) <= CRUSHING_LENGTH && pull <= CRUSHING_PULL) return undefined;
  return (
    `Crushing: at this gap the discs draw together with ${figure(pull)} N (${figure(pull / STANDARD_GRAVITY)} kgf), and ` +
    `single magnets of ${figure(magnetLength(magnets) * 1000)} mm snap together hard enough to crush fingers and throw splinters. ` +
    'Lower the discs with jacking screws, slide magnets over wood, wear eye protection, do not work alone, keep medical ' +
    'implants well away.'
  );
}

function shock(machine: Machine, atSpeed: number): string | undefined {
  const { rotor, operation } = machine;
  const worst = overspeedPeak(machine, atSpeed);
  if (Math.max(atSpeed, worst ?? 0) <= TOUCH_VOLTAGE) return undefined;
  const { overspeedRpm, cold } = operation;
  const overspeed =
    worst === undefined || overspeedRpm === undefined
      ? ''
      : ` and at ${figure(worst)} V at ${figure(overspeedRpm)} rpm${cold === undefined ? '' : ` with magnets at ${figure(cold)} degC`}`;
  const colder = cold === undefined || worst === undefined ? rotor.magnets.temperature : cold;
  return (
    `Electric shock: with the load off, the rectified voltage peaks at ${figure(atSpeed)} V at ` +
    `${figure(operation.speedRpm)} rpm${overspeed}; above ${TOUCH_VOLTAGE} V DC touch can kill. Magnets colder than ` +
    `${figure(colder)} degC raise it further; controllers and capacitors must stand it.`
  );
}

/**
 * Highest rectified voltage with the load open at overspeed, with the magnets at the coldest start where one is given, V;
 * undefined without an overspeed. `openPeak` is that at the operating speed. In proportion to speed and to remanence, which holds while the discs do not saturate
 * (cold magnets in saturated discs give a little less).
 */
export function overspeedPeak({ rotor, operation, materials }: Machine, openPeak: number): number | undefined {
  const { speedRpm, overspeedRpm, cold } = operation;
  if (overspeedRpm === undefined || overspeedRpm < speedRpm) return undefined;
  const magnet = materials[rotor.magnets.material];
  const at = (celsius: number): number => (magnet.kind === 'magnet' ? remanenceAt(magnet, celsius) : 1);
  const warmer = cold === undefined ? 1 : at(cold) / at(rotor.magnets.temperature);
  return (openPeak * overspeedRpm * warmer) / speedRpm;
}

function flyingParts({ rotor, operation }: Machine): string {
  const { speedRpm, overspeedRpm = speedRpm } = operation;
  const fastest = Math.max(speedRpm, overspeedRpm);
  const rim = rotor.disc?.outerRadius ?? magnetReach(rotor.magnets).outer;
  return (
    `Flying parts: the rim runs at ${figure((2 * Math.PI * fastest * rim) / 60)} m/s at ${figure(fastest)} rpm. Hold the ` +
    'magnets by a band or a ring, not by glue alone; test overspeed from behind a guard.'
  );
}

function shorted({ short, brake, rated, warming }: Service): string | undefined {
  return short && shortCircuitCaution(short, brake, rated, warming);
}

function heat({ winding }: Machine): string | undefined {
  if (winding.temperature <= TOUCH_TEMPERATURE) return undefined;
  return (
    `Heat: a winding at ${figure(winding.temperature)} degC burns skin (above ${TOUCH_TEMPERATURE} degC), and overheated ` +
    'resin and enamel give off harmful fumes.'
  );
}

/** Triplen EMFs above 1 % of the fundamental in a closed delta; the winding's resistance alone limits the current told. */
function circulation({ winding }: Machine, figures: CautionFigures): string | undefined {
  const { emf, circulatingEmf } = figures;
  if (winding.connection !== 'delta' || circulatingEmf <= 0.01 * emf.phase.fundamental_rms_V) return undefined;
  const current = figures.service.roundDelta ?? circulatingEmf / figures.winding.phase_resistance_hot_ohm;
  return (
    `Circulating current: harmonics 3, 9, 15, ... put ${figure(circulatingEmf)} V rms per phase round the closed delta and ` +
    `drive up to ${figure(current)} A through it with no load, which heats and brakes. Star avoids it.`
  );
}
