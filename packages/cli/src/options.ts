import type { Setting } from '@gapwright/fem-core/text';
import { type Command, InvalidArgumentError, Option } from 'commander';
import type { Surroundings } from './surroundings.js';

/** Options that every verb working on a machine file takes. */
export interface CommonOptions {
  readonly set: readonly Setting[];
  readonly json?: boolean;
  readonly workers: number;
  readonly quiet?: boolean;
  readonly colour: boolean;
}

export function addCommonOptions(command: Command): Command {
  return command
    .addOption(
      new Option('--set <KEY=VALUE>', 'set a value of the file, for example operation.speed=380rpm; may be repeated')
        .argParser(addSetting)
        .default([], 'none'),
    )
    .option('--json', 'print the result alone, as JSON')
    .option('--workers <N>', 'threads to use at most; this version solves on one', wholeNumber, 1)
    .option('--quiet', 'print no progress, warnings or times')
    .option('--no-colour', 'print without colours (as the environment variable NO_COLOR does)');
}

function addSetting(text: string, before: readonly Setting[]): readonly Setting[] {
  const split = text.indexOf('=');
  if (split < 1) throw new InvalidArgumentError('Give it as KEY=VALUE, for example operation.speed=380rpm.');
  return [...before, { key: text.slice(0, split).trim(), value: text.slice(split + 1).trim() }];
}

function wholeNumber(text: string): number {
  if (!/^[1-9]\d{0,5}$/.test(text)) throw new InvalidArgumentError('Give a whole number, 1 or more.');
  return Number(text);
}

/** Colours go to a terminal only, and only if neither the option nor NO_COLOR (https://no-color.org) forbids them. */
export function colourWanted(options: Pick<CommonOptions, 'colour'>, { stdout, env }: Surroundings): boolean {
  return options.colour && stdout.isTTY === true && (env.NO_COLOR ?? '') === '';
}
