import type { LibraryMaterial } from '../machine.js';

type Grade = readonly [
  name: string,
  lowestRemanence: number,
  highestRemanence: number,
  coercivityIntrinsic: number,
  highestTemperature: number,
];

/** Sintered NdFeB: remanence range in T and least intrinsic coercivity in kA/m at 20 degC, usual highest temperature in degC. */
const NEODYMIUM: readonly Grade[] = [
  ['N35', 1.17, 1.22, 955, 80],
  ['N38', 1.22, 1.27, 955, 80],
  ['N40', 1.25, 1.3, 955, 80],
  ['N42', 1.28, 1.33, 955, 80],
  ['N45', 1.32, 1.38, 955, 80],
  ['N48', 1.37, 1.43, 955, 80],
  ['N50', 1.4, 1.45, 955, 80],
  ['N52', 1.42, 1.48, 955, 80],
  ['N35M', 1.17, 1.22, 1114, 100],
  ['N38M', 1.22, 1.27, 1114, 100],
  ['N40M', 1.25, 1.3, 1114, 100],
  ['N42M', 1.28, 1.33, 1114, 100],
  ['N45M', 1.32, 1.38, 1114, 100],
  ['N48M', 1.37, 1.43, 1114, 100],
  ['N50M', 1.4, 1.45, 1114, 100],
  ['N33H', 1.13, 1.18, 1353, 120],
  ['N35H', 1.17, 1.22, 1353, 120],
  ['N38H', 1.22, 1.27, 1353, 120],
  ['N40H', 1.25, 1.3, 1353, 120],
  ['N42H', 1.28, 1.33, 1353, 120],
  ['N45H', 1.32, 1.38, 1353, 120],
  ['N48H', 1.37, 1.43, 1274, 120],
  ['N30SH', 1.08, 1.13, 1592, 150],
  ['N33SH', 1.13, 1.18, 1592, 150],
  ['N35SH', 1.17, 1.22, 1592, 150],
  ['N38SH', 1.22, 1.27, 1592, 150],
  ['N40SH', 1.25, 1.3, 1592, 150],
  ['N42SH', 1.28, 1.33, 1592, 150],
  ['N45SH', 1.32, 1.38, 1592, 150],
  ['N28UH', 1.02, 1.08, 1990, 180],
  ['N30UH', 1.08, 1.13, 1990, 180],
  ['N33UH', 1.13, 1.18, 1990, 180],
  ['N35UH', 1.17, 1.22, 1990, 180],
  ['N38UH', 1.22, 1.27, 1990, 180],
  ['N40UH', 1.25, 1.3, 1990, 180],
  ['N30EH', 1.08, 1.13, 2388, 200],
  ['N33EH', 1.13, 1.18, 2388, 200],
  ['N35EH', 1.17, 1.22, 2388, 200],
  ['N38EH', 1.22, 1.27, 2388, 200],
];

/** Hard ferrite, as above. */
const FERRITE: readonly Grade[] = [
  ['Y30', 0.37, 0.4, 180, 250],
  ['Y30BH', 0.38, 0.39, 231, 250],
  ['Y35', 0.4, 0.41, 180, 250],
  ['C5', 0.38, 0.38, 199, 250],
  ['C8', 0.385, 0.385, 243, 250],
];

/** Samarium cobalt 1:5, the number after the dash being the energy product in MGOe. */
const SAMARIUM_1_5: readonly Grade[] = [['SmCo5-18', 0.84, 0.89, 1194, 250]];

/** Samarium cobalt 2:17, as above. */
const SAMARIUM_2_17: readonly Grade[] = [
  ['Sm2Co17-26', 1.02, 1.05, 1433, 300],
  ['Sm2Co17-33', 1.14, 1.16, 1750, 350],
];

export const NEODYMIUM_GRADES = grades(NEODYMIUM, {
  recoil: 1.05,
  remanenceSlope: -0.0012,
  coercivitySlope: -0.006,
  density: 7500,
  source:
    "remanence range, coercivity (the least) and highest temperature: a supplier's generic grade table after " +
    'IEC 60404-8-1 and GB/T 13560; recoil, slopes and density: typical values within the ranges stated there ' +
    '(1.03 to 1.10, -0.09 to -0.13 %/K, -0.40 to -0.70 %/K, 7400 to 7600 kg/m3)',
});

export const FERRITE_GRADES = grades(FERRITE, {
  recoil: 1.07,
  remanenceSlope: -0.002,
  coercivitySlope: 0.0027,
  density: 4900,
  source: "typical of suppliers' tables, from memory; coercivity slope: a supplier's note, it falls in the cold",
});

export const SAMARIUM_GRADES: Readonly<Record<string, LibraryMaterial>> = {
  ...grades(SAMARIUM_1_5, {
    recoil: 1.05,
    remanenceSlope: -0.00045,
    coercivitySlope: -0.003,
    density: 8300,
    source: "typical of suppliers' tables, from memory",
  }),
  ...grades(SAMARIUM_2_17, {
    recoil: 1.08,
    remanenceSlope: -0.00035,
    coercivitySlope: -0.0025,
    density: 8400,
    source:
      "typical of suppliers' tables, from memory; remanence, coercivity and slopes of the 33 MGOe class: a maker's data " +
      'sheet, read second-hand',
  }),
};

interface Family {
  readonly recoil: number;
  readonly remanenceSlope: number;
  readonly coercivitySlope: number;
  readonly density: number;
  readonly source: string;
}

/** The remanence taken is the middle of the grade's range; real magnets lie anywhere in it. */
function grades(list: readonly Grade[], family: Family): Readonly<Record<string, LibraryMaterial>> {
  return Object.fromEntries(
    list.map(([name, lowest, highest, kiloamperes, highestTemperature]) => [
      name,
      {
        kind: 'magnet',
        remanence: Math.round(((lowest + highest) / 2) * 1e4) / 1e4,
        remanenceRange: [lowest, highest],
        coercivityIntrinsic: kiloamperes * 1000,
        highestTemperature,
        ...family,
      },
    ]),
  );
}
