import {
  drawField,
  InputError,
  type MeshProgress,
  type SectionAnswer,
  triangleMeans,
  writeVtu,
} from '@gapwright/fem-core';
import { describeSection, type SectionProblem, type SectionResult } from '@gapwright/machine-models';
import { sheetText } from '../datasheet.js';
import { figure, percent } from '../figures.js';
import { checkOutputFolder } from '../files.js';
import { readInputFile } from '../input.js';
import { linesCsv } from '../lines-csv.js';
import { magnitudeOf } from '../magnitude.js';
import { gather, nearPart } from '../near-part.js';
import { colourWanted } from '../options.js';
import { type OutputOptions, refuseVtuAlone, showWarnings, writeOutputs } from '../outputs.js';
import { plainText } from '../plain-text.js';
import { resultJson } from '../results-json.js';
import type { SectionEngine } from '../section-engine.js';
import { sectionSheet } from '../section-sheet.js';
import { exitStatus, type Surroundings } from '../surroundings.js';
import { ownVersion } from '../version.js';

/** `gapwright section FILE`: one planar section, from its file to the answers of its probes. */
export async function runSection(
  engine: SectionEngine,
  file: string,
  options: OutputOptions,
  surroundings: Surroundings,
): Promise<number> {
  const { stdout, stderr, signal } = surroundings;
  const begun = performance.now();
  refuseVtuAlone(options);
  const { read, sha256 } = readInputFile(file, options.set, engine.read);
  const { problem, warnings, place, locate } = read;
  if (options.out !== undefined) checkOutputFolder(options.out, outputNames(problem, options.vtu === true), file);
  const onMesh = (progress: MeshProgress): void => {
    if (!options.quiet && stderr.isTTY === true) stderr.write(progressLine(progress));
  };
  const answer = await placed(place, () => engine.solve(problem, { signal, onMesh }));
  const solvedMs = performance.now() - begun;
  const result = describeSection(problem, answer, warnings, { version: ownVersion(), inputSha256: sha256 });
  if (!options.quiet) showWarnings(result.warnings, options, surroundings, locate);
  stdout.write(
    options.json ? resultJson(result) : sheetText(sectionSheet(problem, result), colourWanted(options, surroundings)),
  );
  if (options.out !== undefined) {
    writeOutputs(options.out, outputFiles(problem, result, answer, options.vtu === true), options, surroundings);
  }
  if (!options.quiet) {
    stderr.write(`solved in ${seconds(solvedMs)}, all done in ${seconds(performance.now() - begun)}\n`);
  }
  return judge(problem, result, surroundings);
}

/** What the solver refuses, told where it stands in the file. */
async function placed<T>(place: (error: InputError) => InputError, solve: () => Promise<T>): Promise<T> {
  try {
    return await solve();
  } catch (error) {
    throw error instanceof InputError ? place(error) : error;
  }
}

const progressLine = ({ mesh, triangles, error }: MeshProgress): string =>
  `mesh ${mesh}: ${triangles} triangles, error ${Number.isFinite(error) ? percent(error, 2) : 'not known'}\n`;

const seconds = (milliseconds: number): string => `${figure(milliseconds / 1000, 3)} s`;

/** Exit status, with a line where what was asked was not reached. */
function judge({ accuracy }: SectionProblem, result: SectionResult, { stderr }: Surroundings): number {
  if (result.converged && result.accurate) return exitStatus.done;
  const what = result.converged
    ? `did not reach the wanted accuracy of ${percent(accuracy, 2)}, but ${percent(result.rel_err, 2)}`
    : `did not converge in ${result.newton_steps} Newton steps; its figures are not to be used`;
  stderr.write(`not reached: the section ${what}\n`);
  return exitStatus.notReached;
}

function outputNames({ probes }: SectionProblem, vtu: boolean): string[] {
  const lines = probes.some(({ kind }) => kind === 'line');
  return ['results.json', 'section.svg', ...(lines ? ['lines.csv'] : []), ...(vtu ? ['section.vtu'] : [])];
}

/** Content of all files by name; the same solution gives the same bytes. */
function outputFiles(
  problem: SectionProblem,
  result: SectionResult,
  answer: SectionAnswer,
  vtu: boolean,
): Map<string, string> {
  const { mesh, potential } = answer.field;
  const magnitude = magnitudeOf(answer.recovered);
  const near = nearPart(mesh);
  const shown =
    near === undefined
      ? { mesh, potential, magnitude }
      : {
          mesh: near.mesh,
          potential: gather(potential, near.nodes, 1),
          magnitude: gather(magnitude, near.triangles, 6),
        };
  const write: Readonly<Record<string, () => string>> = {
    'results.json': () => resultJson(result),
    'section.svg': () => drawField(shown, { title: plainText(result.name) }),
    'lines.csv': () => linesCsv(result),
    'section.vtu': () => {
      const { fluxDensity, relativePermeability } = triangleMeans(answer.field);
      if (near === undefined) return writeVtu({ ...shown, fluxDensity, relativePermeability });
      return writeVtu({
        ...shown,
        fluxDensity: gather(fluxDensity, near.triangles, 2),
        relativePermeability: gather(relativePermeability, near.triangles, 1),
      });
    },
  };
  return new Map(outputNames(problem, vtu).map((name) => [name, write[name]()]));
}
