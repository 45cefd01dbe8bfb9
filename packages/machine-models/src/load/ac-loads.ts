import { combine, evaluate, rms, type Series } from '../waves/series.js';
import { currentDensity, type LoadPoint } from './load-point.js';
import { loopOf, type Source, type Star, starAt, throughImpedance } from './source.js';
import { range } from './torque-ripple.js';

/**
 * A machine on three equal resistances in star (ohm each) at one speed: order by order, the EMF over the impedance of
 * phase, cable and load. The star points are not joined, so what the phases have in common drives nothing.
 *
 * @throws Error on a source without resistance, see `starAt`
 */
export function resistorPoint(source: Source, resistance: number, rpm: number): LoadPoint {
  const star = starAt(source, rpm);
  const total = star.windingResistance + star.cableResistance + resistance;
  return acPoint(
    source,
    star,
    rpm,
    star.emf.map((emf) => throughImpedance(emf, total, star.reactance)),
  );
}

/**
 * A machine on an inverter or active rectifier that keeps its phase currents sinusoidal and in phase with the fundamental
 * of the EMF of phase 1, at one speed. Power is that at the machine's end of the inverter: none of its own losses.
 *
 * @param current rms per phase, A: above 0 the machine generates; below 0 the inverter drives it, and all powers and the
 *   torque come out negative but for the losses
 */
export function drivePoint(source: Source, current: number, rpm: number): LoadPoint {
  const star = starAt(source, rpm);
  const { order, emf } = star;
  const line = source.connection === 'star' ? current : Math.sqrt(3) * current;
  const first = order.indexOf(1);
  const [c, s] = first < 0 ? [0, 1] : [emf[0].cos[first], emf[0].sin[first]];
  const share = (Math.SQRT2 * line) / (Math.hypot(c, s) || 1);
  const currents = [0, 1, 2].map((k): Series => {
    const [turnCos, turnSin] = [Math.cos((k * 2 * Math.PI) / 3), Math.sin((k * 2 * Math.PI) / 3)];
    return {
      order,
      cos: order.map((n) => (n === 1 ? share * (c * turnCos - s * turnSin) : 0)),
      sin: order.map((n) => (n === 1 ? share * (c * turnSin + s * turnCos) : 0)),
    };
  });
  return acPoint(source, star, rpm, currents);
}

/** What currents without a bridge (of the star's three conductors, A) mean for the machine. */
function acPoint(source: Source, star: Star, rpm: number, currents: readonly Series[]): LoadPoint {
  const loop = loopOf(star);
  const resistance = star.windingResistance + star.cableResistance;
  const voltages = star.emf.map((emf, k) =>
    combine([emf, currents[k], slope(currents[k])], [1, -resistance, -star.reactance]),
  );
  const lines = voltages.map((voltage, k) => combine([voltage, voltages[(k + 1) % 3]], [1, -1]));
  const lineSquare = currents.reduce((sum, current) => sum + rms(current) ** 2, 0) / 3;
  const phaseSquare = star.loop === undefined ? lineSquare : lineSquare / 3 + loop.rms ** 2;
  const electromagnetic = meanProduct(star.emf, currents) + loop.power;
  const power = (theta: number): number => {
    const inLoop =
      star.loop === undefined ? 0 : 3 * evaluate(star.loop.emf, theta) * evaluate(star.loop.current, theta);
    return star.emf.reduce((sum, emf, k) => sum + evaluate(emf, theta) * evaluate(currents[k], theta), inLoop);
  };
  const span = star.symmetric ? Math.PI / 3 : Math.PI;
  return {
    speed_rpm: rpm,
    below_cut_in: false,
    ac_line_V: Math.sqrt(lines.reduce((sum, line) => sum + rms(line) ** 2, 0) / 3),
    ac_W: meanProduct(voltages, currents),
    phase_rms_A: Math.sqrt(phaseSquare),
    line_rms_A: Math.sqrt(lineSquare),
    ...(star.loop !== undefined && { loop_rms_A: loop.rms }),
    electromagnetic_W: electromagnetic,
    copper_W: 3 * source.phaseResistance * phaseSquare,
    rectifier_W: 0,
    cable_W: 3 * star.cableResistance * lineSquare,
    torque_Nm: star.turning > 0 ? electromagnetic / star.turning : 0,
    torque_ripple:
      electromagnetic === 0 ? 0 : range(power, [[0, span]], 2 * Math.max(...star.order)) / Math.abs(electromagnetic),
    ...currentDensity(Math.sqrt(phaseSquare), source.conductorArea),
    converged: true,
  };
}

/** Derivative by the electrical angle. */
function slope({ order, cos, sin }: Series): Series {
  return { order, cos: sin.map((value, i) => order[i] * value), sin: cos.map((value, i) => -order[i] * value) };
}

/** Mean over a period of the sum over phases of one times the other; orders alike. */
function meanProduct(ones: readonly Series[], others: readonly Series[]): number {
  return ones.reduce(
    (sum, { cos, sin }, k) =>
      sum + cos.reduce((part, c, i) => part + (c * others[k].cos[i] + sin[i] * others[k].sin[i]) / 2, 0),
    0,
  );
}
