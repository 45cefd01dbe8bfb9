/** A round enamelled copper wire as it is sold. */
export interface WireSize {
  /** `1.180 mm` or `AWG 18`. */
  readonly name: string;
  readonly standard: 'metric' | 'AWG';
  /** Bare copper, m. */
  readonly diameter: number;
  /** Largest overall diameter with enamel of grade 1 and of grade 2, m. */
  readonly overall: readonly [grade1: number, grade2: number];
  /** The overall diameters are not printed in a source but lie between those of the neighbouring metric sizes. */
  readonly interpolated: boolean;
}

/** Grades of enamel a machine file may name. */
export type Enamel = 'grade 1' | 'grade 2' | 'grade 3';

/**
 * Largest overall diameters in micrometres, by bare diameter in micrometres: IEC 60317-0-1 as wire makers' tables print it
 * (up to 1.32 mm one, above it another; 0.280 mm a third), read second-hand; the standard's text was not seen.
 */
const PRINTED: readonly (readonly [bare: number, grade1: number, grade2: number])[] = [
  [200, 226, 239],
  [250, 281, 297],
  [280, 312, 329],
  [315, 349, 367],
  [400, 439, 459],
  [500, 544, 566],
  [630, 679, 704],
  [710, 762, 789],
  [800, 855, 884],
  [900, 959, 989],
  [1000, 1062, 1094],
  [1120, 1184, 1217],
  [1250, 1316, 1349],
  [1320, 1388, 1422],
  [1400, 1468, 1502],
  [1500, 1570, 1606],
  [1600, 1670, 1706],
  [1700, 1772, 1809],
  [1800, 1872, 1909],
  [1900, 1974, 2012],
  [2000, 2074, 2112],
  [2120, 2196, 2235],
  [2240, 2316, 2355],
  [2500, 2578, 2618],
  [2800, 2880, 2922],
];

/**
 * Metric diameters sold, micrometres: the preferred numbers R 20 (ISO 3) from 0.2 to 2.8 mm, and between them, from 0.5 mm,
 * those of R 40 that IEC 60317-0-1 names intermediate (from memory; those printed above agree).
 */
const METRIC: readonly number[] = [
  200, 224, 250, 280, 315, 355, 400, 450, 500, 530, 560, 600, 630, 670, 710, 750, 800, 850, 900, 950, 1000, 1060, 1120,
  1180, 1250, 1320, 1400, 1500, 1600, 1700, 1800, 1900, 2000, 2120, 2240, 2360, 2500, 2650, 2800,
];

/** Gauges sold by the reel that lie within the metric sizes: AWG 9 is 2.906 mm, AWG 33 0.180 mm. */
const [THICKEST_AWG, THINNEST_AWG] = [10, 32];

/**
 * Largest overall diameters in micrometres, by gauge, as a wire maker's catalogue prints them under IEC 60317-0-1 (2021), read
 * second-hand.
 */
const PRINTED_AWG: Readonly<Record<number, readonly [grade1: number, grade2: number]>> = {
  26: [443, 463],
  27: [398, 417],
  28: [354, 373],
  29: [319, 337],
  30: [285, 301],
  31: [254, 268],
  32: [229, 242],
};

/** Diameter of AWG n:  0.127 mm x 92^((36 - n)/39),  m. ASTM B258, from memory. */
export function awgDiameter(gauge: number): number {
  return 0.127e-3 * 92 ** ((36 - gauge) / 39);
}

const MICRO = 1e-6;

/** Every size the chooser knows, thickest first; metric and AWG among each other. */
export const WIRE_SIZES: readonly WireSize[] = [...METRIC.map(metricSize), ...gauges().map(awgSize)].sort(
  (a, b) => b.diameter - a.diameter,
);

function gauges(): readonly number[] {
  return Array.from({ length: THINNEST_AWG - THICKEST_AWG + 1 }, (_, i) => THICKEST_AWG + i);
}

function metricSize(bare: number): WireSize {
  const printed = PRINTED.find(([diameter]) => diameter === bare);
  const diameter = bare * MICRO;
  return {
    name: `${(bare / 1000).toFixed(3)} mm`,
    standard: 'metric',
    diameter,
    overall: printed === undefined ? between(diameter) : [printed[1] * MICRO, printed[2] * MICRO],
    interpolated: printed === undefined,
  };
}

function awgSize(gauge: number): WireSize {
  const printed = PRINTED_AWG[gauge];
  const diameter = awgDiameter(gauge);
  return {
    name: `AWG ${gauge}`,
    standard: 'AWG',
    diameter,
    overall: printed === undefined ? between(diameter) : [printed[0] * MICRO, printed[1] * MICRO],
    interpolated: printed === undefined,
  };
}

/** Bare diameter and the thickness of both sides' enamel between those of the printed neighbours, m. */
function between(diameter: number): readonly [number, number] {
  const bare = diameter / MICRO;
  const above = PRINTED.findIndex(([size]) => size >= bare);
  const [[low, low1, low2], [high, high1, high2]] = [PRINTED[above - 1], PRINTED[above]];
  const share = (bare - low) / (high - low);
  const enamel = (atLow: number, atHigh: number): number => atLow - low + share * (atHigh - high - (atLow - low));
  return [diameter + enamel(low1, high1) * MICRO, diameter + enamel(low2, high2) * MICRO];
}

/**
 * Largest overall diameter, m. Grade 3 is not in the tables at hand: it is taken to add to grade 2 what that adds to grade 1.
 */
export function overallDiameter({ overall: [first, second] }: WireSize, enamel: Enamel): number {
  switch (enamel) {
    case 'grade 1':
      return first;
    case 'grade 2':
      return second;
    case 'grade 3':
      return 2 * second - first;
  }
}
