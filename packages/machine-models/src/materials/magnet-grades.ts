import type { LibraryMaterial } from '../machine.js';

type Grade = readonly [name: string, lowestRemanence: number, highestRemanence: number, coercivityIntrinsic: number];

/** Sintered NdFeB: remanence range in T at 20 degC, least intrinsic coercivity in kA/m. */
const NEODYMIUM: readonly Grade[] = [
  ['N35', 1.17, 1.22, 955],
  ['N38', 1.22, 1.27, 955],
  ['N40', 1.25, 1.3, 955],
  ['N42', 1.28, 1.33, 955],
  ['N45', 1.32, 1.38, 955],
  ['N48', 1.37, 1.43, 955],
  ['N50', 1.4, 1.45, 955],
  ['N52', 1.42, 1.48, 955],
  ['N35M', 1.17, 1.22, 1114],
  ['N38M', 1.22, 1.27, 1114],
  ['N40M', 1.25, 1.3, 1114],
  ['N42M', 1.28, 1.33, 1114],
  ['N45M', 1.32, 1.38, 1114],
  ['N48M', 1.37, 1.43, 1114],
  ['N50M', 1.4, 1.45, 1114],
  ['N33H', 1.13, 1.18, 1353],
  ['N35H', 1.17, 1.22, 1353],
  ['N38H', 1.22, 1.27, 1353],
  ['N40H', 1.25, 1.3, 1353],
  ['N42H', 1.28, 1.33, 1353],
  ['N45H', 1.32, 1.38, 1353],
  ['N48H', 1.37, 1.43, 1274],
  ['N30SH', 1.08, 1.13, 1592],
  ['N33SH', 1.13, 1.18, 1592],
  ['N35SH', 1.17, 1.22, 1592],
  ['N38SH', 1.22, 1.27, 1592],
  ['N40SH', 1.25, 1.3, 1592],
  ['N42SH', 1.28, 1.33, 1592],
  ['N45SH', 1.32, 1.38, 1592],
  ['N28UH', 1.02, 1.08, 1990],
  ['N30UH', 1.08, 1.13, 1990],
  ['N33UH', 1.13, 1.18, 1990],
  ['N35UH', 1.17, 1.22, 1990],
  ['N38UH', 1.22, 1.27, 1990],
  ['N40UH', 1.25, 1.3, 1990],
  ['N30EH', 1.08, 1.13, 2388],
  ['N33EH', 1.13, 1.18, 2388],
  ['N35EH', 1.17, 1.22, 2388],
  ['N38EH', 1.22, 1.27, 2388],
];

/** Hard ferrite, as above. */
const FERRITE: readonly Grade[] = [
  ['Y30', 0.37, 0.4, 180],
  ['Y30BH', 0.38, 0.39, 231],
  ['Y35', 0.4, 0.41, 180],
  ['C5', 0.38, 0.38, 199],
  ['C8', 0.385, 0.385, 243],
];

/** The remanence taken is the middle of the grade's range; real magnets lie anywhere in it. */
export const MAGNET_GRADES: Readonly<Record<string, LibraryMaterial>> = Object.fromEntries([
  ...NEODYMIUM.map((grade) =>
    magnet(grade, {
      recoil: 1.05,
      remanenceSlope: -0.0012,
      coercivitySlope: -0.006,
      density: 7500,
      source:
        "remanence range and coercivity: a supplier's generic grade table after IEC 60404-8-1 and GB/T 13560; recoil, " +
        'slopes and density: typical values within the ranges stated there',
    }),
  ),
  ...FERRITE.map((grade) =>
    magnet(grade, {
      recoil: 1.07,
      remanenceSlope: -0.002,
      coercivitySlope: 0.0027,
      density: 4900,
      source: "typical of suppliers' tables, from memory; coercivity slope: a supplier's note, it falls in the cold",
    }),
  ),
]);

interface Family {
  readonly recoil: number;
  readonly remanenceSlope: number;
  readonly coercivitySlope: number;
  readonly density: number;
  readonly source: string;
}

function magnet([name, lowest, highest, kiloamperes]: Grade, family: Family): [string, LibraryMaterial] {
  const remanence = Math.round(((lowest + highest) / 2) * 1e4) / 1e4;
  return [name, { kind: 'magnet', remanence, coercivityIntrinsic: kiloamperes * 1000, ...family }];
}
