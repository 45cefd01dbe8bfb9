import type { Engine } from '../engine.js';
import { given, givenMm } from '../figures.js';
import { readMachineFile } from '../input.js';
import type { CommonOptions } from '../options.js';
import { plainText } from '../plain-text.js';
import { resultJson } from '../results-json.js';
import { exitStatus, type Surroundings } from '../surroundings.js';
import { ownVersion } from '../version.js';

/** `gapwright check FILE`: reads and judges a machine file without solving it. */
export function runCheck(
  engine: Engine,
  file: string,
  options: CommonOptions,
  { stdout, stderr }: Surroundings,
): number {
  const { machine, warnings, sha256 } = readMachineFile(engine, file, options.set);
  if (!options.quiet) for (const { key, text } of warnings) stderr.write(`warning: ${plainText(`${key}: ${text}`)}\n`);
  if (options.json) {
    stdout.write(
      resultJson({
        format: 'gapwright-check/1',
        gapwright: ownVersion(),
        machine: machine.name,
        input_sha256: sha256,
        warnings,
      }),
    );
    return exitStatus.done;
  }
  const { rotor, winding, operation, model } = machine;
  const radii = model.slices.map(({ radius }) => givenMm(radius)).join(', ');
  const remarks = warnings.length === 1 ? '1 warning' : `${warnings.length} warnings`;
  stdout.write(
    `${plainText(file)}: sound, ${remarks}: ${plainText(machine.name)}, ${rotor.poles} poles, ${winding.coils} coils, ` +
      `gap ${givenMm(rotor.gap)} mm, ${given(operation.speedRpm)} rpm, slices at ${radii} mm\n`,
  );
  return exitStatus.done;
}
