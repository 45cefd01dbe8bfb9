import { triangleMeans } from '@gapwright/fem-core';
import type { Machine, SolvedSlice } from '@gapwright/machine-models';
import { describeMachine, findAll, imagesOfPolePair, readMachine, sliceSteps } from '@gapwright/machine-models';
import type { Engine, SliceField } from './engine.js';
import { magnitudeOf } from './magnitude.js';
import { stopIfInterrupted } from './surroundings.js';

/** The models as the commands use them. */
export const machineEngine: Engine = {
  read: readMachine,

  async solve(machine, options) {
    const steps = sliceSteps(machine);
    for (let count = 0; ; count++) {
      await hearInterruption(options.signal);
      const step = steps.next();
      if (!step.done) {
        options.onSlice(step.value.answer, count);
        continue;
      }
      const findings = findAll(machine, step.value);
      await hearInterruption(options.signal);
      const stamp = { version: options.version, inputSha256: options.inputSha256 };
      return {
        result: describeMachine(machine, findings, options.warnings, stamp),
        answers: findings.slices,
        ...(findings.refined !== undefined && { settled: findings.refined.settled }),
        fieldOf: (index) => pictured(machine, step.value.slices[index]),
      };
    }
  },
};

/** Between slices and after the last: whatever runs in one go hears nothing. */
async function hearInterruption(signal: AbortSignal): Promise<void> {
  await new Promise((resolve) => setImmediate(resolve));
  stopIfInterrupted(signal);
}

/** Air shown behind a disc, in pole pitches; there is more, but nothing happens in it. */
const airShown = 0.35;

function pictured({ rotor }: Machine, { field, recovered, pole }: SolvedSlice): SliceField {
  const { mesh, potential } = field;
  const air = airShown * pole.polePitch;
  const upper = rotor.gap / 2 + rotor.magnets.thickness + (rotor.disc?.thickness ?? 0) + air;
  const lower = rotor.keeper === undefined ? upper : rotor.gap / 2 + rotor.keeper.thickness + air;
  return {
    mesh,
    potential,
    magnitude: magnitudeOf(recovered),
    ...triangleMeans(field),
    copies: imagesOfPolePair(pole),
    heights: [-lower, upper],
  };
}
