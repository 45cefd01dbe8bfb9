import { MU0 } from '@gapwright/fem-core';

/** Rows [H in A/m, B in T], strictly rising, from [0, 0]. */
export type BhTable = readonly (readonly [H: number, B: number])[];

/** From rows [H in A/m, polarisation J in T], as makers of sheet give them: B = J + mu0 H. */
const fromPolarisation = (rows: BhTable): BhTable => rows.map(([h, j]) => [h, j + MU0 * h]);

/** Sheet of 3.3 W/kg, 0.5 mm: J as its data sheet gives it from 0.5 to 1.9 T; the last row is where it is taken as saturated. */
export const SHEET_330: BhTable = fromPolarisation([
  [0, 0],
  [53, 0.5],
  [60, 0.6],
  [69, 0.7],
  [79, 0.8],
  [93, 0.9],
  [112, 1],
  [141, 1.1],
  [192, 1.2],
  [313, 1.3],
  [698, 1.4],
  [1932, 1.5],
  [4284, 1.6],
  [7750, 1.7],
  [13318, 1.8],
  [19610, 1.9],
  [50000, 2],
]);

/** Sheet of 4.0 W/kg, 0.5 mm, as above. */
export const SHEET_400: BhTable = fromPolarisation([
  [0, 0],
  [75, 0.5],
  [84, 0.6],
  [93, 0.7],
  [104, 0.8],
  [117, 0.9],
  [134, 1],
  [159, 1.1],
  [199, 1.2],
  [282, 1.3],
  [505, 1.4],
  [1284, 1.5],
  [3343, 1.6],
  [6787, 1.7],
  [11712, 1.8],
  [19044, 1.9],
  [100000, 2],
]);

/**
 * Sheet of 4.7 W/kg, 0.5 mm, measured by its maker up to 33 kA/m; beyond, the exponential approach to saturation that the
 * source carries the measurement on with.
 */
export const SHEET_470: BhTable = [
  ...fromPolarisation([
    [0, 0],
    [9.97, 0.00864],
    [20.01, 0.02059],
    [29.98, 0.03698],
    [39.99, 0.05922],
    [50.04, 0.08855],
    [60, 0.14439],
    [70.22, 0.24971],
    [79.99, 0.39189],
    [89.54, 0.53617],
    [100.01, 0.69699],
    [125.01, 0.99416],
    [150.01, 1.13982],
    [174.92, 1.21722],
    [199.85, 1.2668],
    [250.01, 1.32736],
    [349.98, 1.38921],
    [499.56, 1.43518],
    [750.07, 1.47684],
    [1000.16, 1.50347],
    [1250.38, 1.52363],
    [1499, 1.54015],
    [1995.1, 1.56696],
    [2501.43, 1.58954],
    [5004.23, 1.67248],
    [7480.22, 1.73429],
    [10009.6, 1.78625],
    [14994.52, 1.86728],
    [19510.15, 1.9219],
    [25125.71, 1.96995],
    [28348.23, 1.98894],
    [31977.55, 2.00431],
    [33277.47, 2.0086],
  ]),
  ...approach(
    { from: 1995.1, polarisation: 1.56696, saturation: 2.05381, scale: 13221.84 },
    [45000, 60000, 80000, 120000, 165628.7],
  ),
];

/** Grey cast iron, an artificial curve made for teaching; from 25 kA/m on the exponential approach its source gives. */
export const CAST_IRON: BhTable = [
  ...fromPolarisation([
    [0, 0],
    [200, 0.03975],
    [400, 0.08648],
    [700, 0.18946],
    [800, 0.23053],
    [1000, 0.31286],
    [1250, 0.40582],
    [1400, 0.45346],
    [1550, 0.49471],
    [1750, 0.54053],
    [2000, 0.58552],
    [3000, 0.68911],
    [4000, 0.74949],
    [5000, 0.79929],
    [6000, 0.84394],
    [7000, 0.88449],
    [8500, 0.93858],
    [10000, 0.98555],
    [12000, 1.0387],
    [14000, 1.08274],
    [16500, 1.12733],
    [20000, 1.17451],
  ]),
  ...approach(
    { from: 3000, polarisation: 0.68911, saturation: 1.27765, scale: 9901.06 },
    [25000, 30000, 40000, 60000, 90000, 132113.5],
  ),
];

/**
 * Steel of the three-dimensional benchmark problem 13 of the TEAM workshops: the 27 points of its definition up to 1.8 T,
 * then rows of its laws B = mu0 H - 2.381e-10 H^2 + 2.327e-5 H + 1.590 (up to 2.22 T) and B = mu0 H + 2.16. The two miss
 * each other by 1.4 mT; the rows rise all the same.
 */
export const BENCHMARK_STEEL: BhTable = [
  [0, 0],
  [16, 0.0025],
  [30, 0.005],
  [54, 0.0125],
  [93, 0.025],
  [143, 0.05],
  [191, 0.1],
  [210, 0.2],
  [222, 0.3],
  [233, 0.4],
  [247, 0.5],
  [258, 0.6],
  [272, 0.7],
  [289, 0.8],
  [313, 0.9],
  [342, 1],
  [377, 1.1],
  [433, 1.2],
  [509, 1.3],
  [648, 1.4],
  [933, 1.5],
  [1228, 1.55],
  [1934, 1.6],
  [2913, 1.65],
  [4993, 1.7],
  [7189, 1.75],
  [9423, 1.8],
  ...fromPolarisation(
    [12000, 15000, 18000, 22000, 26000, 30000, 35000, 40000, 45000].map((h) => [
      h,
      -2.381e-10 * h * h + 2.327e-5 * h + 1.59,
    ]),
  ),
  ...fromPolarisation([60000, 100000, 200000].map((h) => [h, 2.16])),
];

interface Approach {
  /** A/m and T: where the approach begins. */
  readonly from: number;
  readonly polarisation: number;
  /** T. */
  readonly saturation: number;
  /** A/m. */
  readonly scale: number;
}

/** Rows of J = polarisation + (saturation - polarisation) (1 - exp(-(H - from) / scale)), B = J + mu0 H. */
function approach({ from, polarisation, saturation, scale }: Approach, fields: readonly number[]): BhTable {
  const rise = (h: number): number => (saturation - polarisation) * (1 - Math.exp(-(h - from) / scale));
  return fromPolarisation(fields.map((h) => [h, polarisation + rise(h)]));
}
