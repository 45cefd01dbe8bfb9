import { drawField, writeVtu } from '@gapwright/fem-core';
import { colourScaleEnd } from '@gapwright/fem-core/field';
import type { Machine, MachineResult, SliceAnswer } from '@gapwright/machine-models';
import { sheetText } from '../datasheet.js';
import type { Engine, SliceField, SolvedMachine } from '../engine.js';
import { figure, given, percent } from '../figures.js';
import { checkOutputFolder } from '../files.js';
import { readMachineFile } from '../input.js';
import { colourWanted } from '../options.js';
import { type OutputOptions, refuseVtuAlone, showWarnings, writeOutputs } from '../outputs.js';
import { plainText } from '../plain-text.js';
import { resultJson } from '../results-json.js';
import { datasheet } from '../sheet.js';
import { exitStatus, type Surroundings } from '../surroundings.js';
import { ownVersion } from '../version.js';
import { waveformsCsv } from '../waveforms-csv.js';

/** `gapwright solve FILE`: the main job, from a machine file to its datasheet. */
export async function runSolve(
  engine: Engine,
  file: string,
  options: OutputOptions,
  surroundings: Surroundings,
): Promise<number> {
  const { stdout, stderr, signal } = surroundings;
  const begun = performance.now();
  refuseVtuAlone(options);
  const { machine, warnings, sha256 } = readMachineFile(engine, file, options.set);
  if (options.out !== undefined)
    checkOutputFolder(options.out, outputNames(machine.model.slices, options.vtu === true), file);
  if (!options.quiet) showWarnings(warnings, options, surroundings);
  const solved = await engine.solve(machine, {
    version: ownVersion(),
    inputSha256: sha256,
    warnings,
    signal,
    onSlice: (answer, index) => {
      if (!options.quiet && stderr.isTTY === true) stderr.write(progressLine(answer, index, machine));
    },
  });
  const solvedMs = performance.now() - begun;
  const { result } = solved;
  stdout.write(
    options.json ? resultJson(result) : sheetText(datasheet(machine, result), colourWanted(options, surroundings)),
  );
  if (options.out !== undefined) {
    const files = await outputFiles(machine, solved, options.vtu === true);
    writeOutputs(options.out, files, options, surroundings);
  }
  if (!options.quiet) stderr.write(`${timeLine(solved.answers, solvedMs, performance.now() - begun)}\n`);
  return judge(machine, solved, surroundings);
}

function progressLine(answer: SliceAnswer, index: number, machine: Machine): string {
  const { mesh, meshes, newtonStepsTotal } = answer;
  return (
    `slice ${index + 1}${machine.model.auto ? '' : ` of ${machine.model.slices.length}`}, radius ${sliceMm(answer.radius)} mm: ` +
    `${mesh.triangles} triangles, mesh ${meshes}, ${newtonStepsTotal} Newton steps in all\n`
  );
}

function timeLine({ length }: readonly SliceAnswer[], solvedMs: number, totalMs: number): string {
  return `${length} ${length === 1 ? 'slice' : 'slices'} solved in ${figure(solvedMs / 1000, 3)} s, all done in ${figure(totalMs / 1000, 3)} s`;
}

/** Exit status, with a line for each slice that did not reach what was asked. */
function judge(machine: Machine, { answers, settled }: SolvedMachine, { stderr }: Surroundings): number {
  const short = answers.filter(({ converged, accurate }) => !converged || !accurate);
  for (const { radius, converged, newtonSteps, residuals } of short) {
    const what = converged
      ? `did not reach the wanted accuracy of ${percent(machine.model.accuracy, 2)}`
      : `did not converge in ${newtonSteps} Newton steps; its figures are not to be used (last residuals ${residuals
          .slice(-6)
          .map((r) => r.toExponential(1))
          .join(', ')})`;
    stderr.write(`not reached: the slice at radius ${sliceMm(radius)} mm ${what}\n`);
  }
  if (settled === false)
    stderr.write('not reached: the flux of the leg did not settle with the finest choice of radii\n');
  return short.length === 0 && settled !== false ? exitStatus.done : exitStatus.notReached;
}

/** Radii that a rule has chosen have many digits. */
const sliceMm = (radius: number): string => given(1000 * radius, 5);

const sliceName = (radius: number, index: number): string => `slice-${index + 1}-${sliceMm(radius)}mm`;

/** Of as many slices as are known: before the solve, `radii: auto` has told the first ones only. */
function outputNames(radii: readonly { readonly radius: number }[], vtu: boolean): string[] {
  const slices = radii.map(({ radius }, k) => sliceName(radius, k));
  return [
    'results.json',
    'waveforms.csv',
    'report.html',
    ...slices.map((name) => `${name}.svg`),
    ...(vtu ? slices.map((name) => `${name}.vtu`) : []),
  ];
}

/** Content of all files by name; the same solution gives the same bytes. */
async function outputFiles(
  machine: Machine,
  { result, answers, fieldOf }: SolvedMachine,
  vtu: boolean,
): Promise<Map<string, string>> {
  // The chart library takes longer to load than a slice to solve, so it is loaded only here.
  const { reportHtml } = await import('../report/report.js');
  const fields = answers.map((_, index) => fieldOf(index));
  const pictures = drawPictures(result, fields);
  const contents = [
    resultJson(result),
    waveformsCsv(result),
    reportHtml(datasheet(machine, result), result, pictures),
    ...pictures,
    ...(vtu ? fields.map(writeVtu) : []),
  ];
  return new Map(outputNames(answers, vtu).map((name, k) => [name, contents[k]]));
}

/** One picture a slice, all on one colour scale so that they can be compared. */
function drawPictures(result: MachineResult, fields: readonly SliceField[]): string[] {
  const scaleEnd = Math.max(...fields.map(({ mesh, magnitude }) => colourScaleEnd(mesh, magnitude)));
  return fields.map((field, k) =>
    drawField(field, {
      title: `Slice at radius ${sliceMm(result.slices[k].radius_m)} mm: ${plainText(result.machine)}`,
      copies: field.copies,
      heights: field.heights,
      scaleEnd,
      idPrefix: `slice-${k + 1}-`,
    }),
  );
}
