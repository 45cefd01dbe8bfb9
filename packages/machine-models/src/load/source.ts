import { combine, peak, rms, type Series, scaleEach } from '../waves/series.js';

/** A three-phase machine as its load sees it: from the fields of its geometry or from a bench test alone. */
export interface Source {
  /** EMFs of the three phases against the electrical angle, V at `referenceRpm`; they grow with speed. */
  readonly phases: readonly Series[];
  readonly referenceRpm: number;
  readonly poles: number;
  /** Of one phase at the temperature of the winding, ohm; above 0. */
  readonly phaseResistance: number;
  /** Self less mutual, H; 0 is allowed. */
  readonly phaseInductance: number;
  /** Self and twice the mutual, H, which a current round a closed delta meets; `phaseInductance` where it is not given. */
  readonly loopInductance?: number;
  readonly connection: 'star' | 'delta';
  /** Of one conductor from the machine to its load, ohm. */
  readonly cableResistance: number;
  /** Copper that carries the current of a phase (all strands, all parallel paths), m^2. */
  readonly conductorArea?: number;
}

/**
 * The machine as an equal star at one speed, seen from its terminals; currents are positive out of the machine.
 *
 * Star: what is common to the three phases, e0 = (e1 + e2 + e3)/3, finds no way back from a floating star point, so
 * emf_k = e_k - e0. Delta, phase 1 from terminal 2 to terminal 1 and so on: e0 drives a current round the loop whatever the
 * load; the rest gives  emf_1 = (e1 - e3)/3  and a third of the impedance. Both hold for phases of one impedance, be their
 * EMFs alike or not.
 */
export interface Star {
  /** Common to all three, rising. */
  readonly order: readonly number[];
  /** V; they add to nought at every angle. */
  readonly emf: readonly [Series, Series, Series];
  /** Of the winding and of the cable, ohm. */
  readonly windingResistance: number;
  readonly cableResistance: number;
  /** Of the fundamental, ohm. */
  readonly reactance: number;
  /** Of the delta: the current round it, A, and the EMF e0 that drives it, V. */
  readonly loop: { readonly current: Series; readonly emf: Series } | undefined;
  /** Each phase is the one before it 120 degrees later: a sixth of the period tells all. */
  readonly symmetric: boolean;
  /** Mechanical, rad/s. */
  readonly turning: number;
}

/** Three phases  sum of peak_n sin(n theta), each 120 degrees later than the one before, as a bench test gives them. */
export function phasesFromPeaks(order: readonly number[], peaks: readonly number[]): readonly Series[] {
  return [0, 1, 2].map((k) => later({ order, cos: order.map(() => 0), sin: peaks }, k));
}

/** The wave k thirds of a period later: f(theta - k 120 degrees). Whole turns are taken out first, so thirds are exact. */
function later({ order, cos, sin }: Series, k: number): Series {
  const turned = order.map((n) => ((((n * k) % 3) + 3) % 3) * ((2 * Math.PI) / 3));
  return {
    order,
    cos: turned.map((angle, i) => cos[i] * Math.cos(angle) - sin[i] * Math.sin(angle)),
    sin: turned.map((angle, i) => cos[i] * Math.sin(angle) + sin[i] * Math.cos(angle)),
  };
}

/**
 * See `Star`.
 *
 * @throws Error if there are not three phases of the same orders, or no resistance: without one the currents of switching
 *   on never die away
 */
export function starAt(source: Source, rpm: number): Star {
  const { phases, referenceRpm, poles, phaseResistance, phaseInductance, connection, cableResistance } = source;
  const { order } = phases[0];
  const alike = phases.every(
    (phase) => phase.order.length === order.length && phase.order.every((n, i) => n === order[i]),
  );
  if (phases.length !== 3 || !alike) throw new Error('a load takes three phases of the same orders');
  if (!(phaseResistance > 0) || !(cableResistance >= 0) || !(phaseInductance >= 0)) {
    throw new Error('a load takes a phase resistance above 0, and cable and inductance not below it');
  }
  const scaled = phases.map((phase) =>
    scaleEach(
      phase,
      order.map(() => rpm / referenceRpm),
    ),
  );
  const common = combine(scaled, [1 / 3, 1 / 3, 1 / 3]);
  const turning = (2 * Math.PI * rpm) / 60;
  const omega = (turning * poles) / 2;
  const share = connection === 'star' ? 1 : 1 / 3;
  const emf = (k: number): Series =>
    connection === 'star'
      ? combine([scaled[k], common], [1, -1])
      : combine([scaled[k], scaled[(k + 2) % 3]], [1 / 3, -1 / 3]);
  const { loopInductance = phaseInductance } = source;
  return {
    order,
    emf: [emf(0), emf(1), emf(2)],
    windingResistance: share * phaseResistance,
    cableResistance,
    reactance: share * omega * phaseInductance,
    loop:
      connection === 'star'
        ? undefined
        : { emf: common, current: throughImpedance(common, phaseResistance, omega * loopInductance) },
    symmetric: isSymmetric(phases),
    turning,
  };
}

function isSymmetric(phases: readonly Series[]): boolean {
  const size = Math.max(...phases.flatMap(({ cos, sin }) => [...cos, ...sin].map(Math.abs)));
  const near = (one: readonly number[], other: readonly number[]): boolean =>
    one.every((value, i) => Math.abs(value - other[i]) <= 1e-12 * size);
  return [1, 2].every((k) => {
    const wanted = later(phases[0], k);
    return near(phases[k].cos, wanted.cos) && near(phases[k].sin, wanted.sin);
  });
}

/**
 * The steady current that an EMF (V) drives through a resistance (ohm) and a reactance (ohm, of the fundamental):
 * order by order, resistance i + reactance di/dtheta = e.
 */
export function throughImpedance({ order, cos, sin }: Series, resistance: number, reactance: number): Series {
  const square = order.map((n) => resistance ** 2 + (n * reactance) ** 2);
  return {
    order,
    cos: square.map((d, i) => (resistance * cos[i] - order[i] * reactance * sin[i]) / d),
    sin: square.map((d, i) => (resistance * sin[i] + order[i] * reactance * cos[i]) / d),
  };
}

/** Current round a delta, rms A, and the power that keeps it up, W, all of which heats the winding; 0 in star. */
export function loopOf({ loop, windingResistance }: Star): { readonly rms: number; readonly power: number } {
  if (loop === undefined) return { rms: 0, power: 0 };
  const current = rms(loop.current);
  return { rms: current, power: 9 * windingResistance * current ** 2 };
}

/** Highest voltage between any two terminals, nothing connected, V. */
export function linePeak({ emf, symmetric }: Pick<Star, 'emf' | 'symmetric'>): number {
  const between = (k: number): number => peak(combine([emf[k], emf[(k + 1) % 3]], [1, -1]));
  return symmetric ? between(0) : Math.max(between(0), between(1), between(2));
}

/** Speed at which a bridge begins to conduct, rpm: there the line's peak reaches the DC voltage and two diodes' drops. */
export function cutInSpeed(source: Source, voltage: number, diodeDrop: number): number {
  return (source.referenceRpm * (voltage + 2 * diodeDrop)) / linePeak(starAt(source, source.referenceRpm));
}
