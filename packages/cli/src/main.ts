import { formatFault, InputError } from '@gapwright/fem-core';
import { buildVerification } from '@gapwright/fem-core/verify';
import { Command, CommanderError } from 'commander';
import { runCheck } from './commands/check.js';
import { type MaterialsOptions, runMaterials } from './commands/materials.js';
import { type NewOptions, runNew } from './commands/new.js';
import { runSection } from './commands/section.js';
import { runSolve } from './commands/solve.js';
import { runVerify, type VerifyOptions } from './commands/verify.js';
import type { Engine } from './engine.js';
import { addCommonOptions, type CommonOptions } from './options.js';
import type { OutputOptions } from './outputs.js';
import { plainLines, plainText } from './plain-text.js';
import { type SectionEngine, sectionEngine } from './section-engine.js';
import { machineEngine } from './solve-machine.js';
import { exitStatus, Interrupted, type Surroundings } from './surroundings.js';
import { ownVersion } from './version.js';

export type { Engine } from './engine.js';
export type { SectionEngine } from './section-engine.js';
export type { Output, Surroundings } from './surroundings.js';

/**
 * Runs one command.
 *
 * @param argv          what follows the program's name
 * @param surroundings  streams, environment, interruption
 * @param engine        the models of machines; another one only in tests
 * @param sections      those of sections; another one only in tests
 * @returns the exit status: 0 done, 1 own fault, 2 command line or file at fault, 3 not reached, 130 interrupted
 */
export async function main(
  argv: readonly string[],
  surroundings: Surroundings,
  engine: Engine = machineEngine,
  sections: SectionEngine = sectionEngine,
): Promise<number> {
  try {
    return await runCommand(argv, surroundings, engine, sections);
  } catch (error) {
    return report(error, surroundings);
  }
}

async function runCommand(
  argv: readonly string[],
  surroundings: Surroundings,
  engine: Engine,
  sections: SectionEngine,
): Promise<number> {
  let status: number = exitStatus.done;
  const program = new Command('gapwright')
    .description('Designs small axial-flux permanent-magnet machines from a text file.')
    .version(ownVersion())
    .exitOverride()
    .configureOutput({
      writeOut: (text) => surroundings.stdout.write(plainLines(text)),
      writeErr: (text) => surroundings.stderr.write(plainLines(text)),
      getOutHelpWidth: () => 100,
      getErrHelpWidth: () => 100,
      getOutHasColors: () => false,
      getErrHasColors: () => false,
    });
  program
    .command('new')
    .description('write a starter machine file')
    .argument('[DIR]', 'folder to write it to', '.')
    .option('--scenario <NAME>', 'which one', 'hut-hydro')
    .option('--list', 'name the scenarios')
    .action((directory: string, options: NewOptions) => {
      status = runNew(directory, options, surroundings);
    });
  addCommonOptions(program.command('check'))
    .description('read and judge a machine file or a section file without solving it')
    .argument('<FILE>', 'machine file or section file')
    .action((file: string, options: CommonOptions) => {
      status = runCheck(engine, sections, file, options, surroundings);
    });
  addCommonOptions(program.command('solve'))
    .description('the main job: slices, EMF, winding, forces, cautions')
    .argument('<FILE>', 'machine file')
    .option('--out <DIR>', 'write results.json, waveforms.csv, report.html and a picture of each slice there')
    .option('--vtu', 'with --out: also each slice as VTK XML')
    .action(async (file: string, options: OutputOptions) => {
      status = await runSolve(engine, file, options, surroundings);
    });
  addCommonOptions(program.command('section'))
    .description('one planar section of any kind: field, energy, forces, fluxes, linkages')
    .argument(
      '<FILE>',
      'section file, of format gapwright-section/1 (README lists its keys; examples: packages/cli/sections)',
    )
    .option('--out <DIR>', 'write results.json, lines.csv and a picture of the section there')
    .option('--vtu', 'with --out: also the section as VTK XML')
    .action(async (file: string, options: OutputOptions) => {
      status = await runSection(sections, file, options, surroundings);
    });
  addCommonOptions(program.command('materials'))
    .description('the library of materials; with a name, all figures of one and its curve')
    .argument('[NAME]', 'a material, for example N42 or "AISI 1008"')
    .option('--file <FILE>', 'machine or section file whose own materials count too')
    .option('--temperature <VALUE>', 'of a magnet, for example 80degC')
    .option('--out <DIR>', 'write results.json and, with a name, curve.svg there')
    .action((name: string | undefined, options: MaterialsOptions) => {
      status = runMaterials(name, options, surroundings);
    });
  program
    .command('verify')
    .description('the solver against closed forms, error by error')
    .option('--json', 'print the result alone, as JSON')
    .option('--quiet', 'print no progress and no time')
    .option('--no-colour', 'print without colours')
    .action(async (options: VerifyOptions) => {
      status = await runVerify(buildVerification(), options, surroundings);
    });
  await program.parseAsync(argv, { from: 'user' });
  return status;
}

/** Says on standard error what went wrong, and gives the exit status for it. */
function report(error: unknown, { stderr, env }: Surroundings): number {
  if (error instanceof CommanderError) return error.exitCode === 0 ? exitStatus.done : exitStatus.inputFault;
  if (error instanceof InputError) {
    for (const fault of error.faults) stderr.write(`${plainText(formatFault(fault))}\n`);
    return exitStatus.inputFault;
  }
  if (error instanceof Interrupted) {
    stderr.write('interrupted; nothing was written\n');
    return exitStatus.interrupted;
  }
  const message = error instanceof Error ? error.message : String(error);
  stderr.write(`a fault of Gapwright's own: ${plainText(message)}, please report\n`);
  if ((env.GAPWRIGHT_TRACE ?? '') !== '' && error instanceof Error) stderr.write(`${plainLines(error.stack ?? '')}\n`);
  return exitStatus.ownFault;
}
