import { InputError } from '../base/fault.js';

/** What is told of drawn lines that cannot be parted at the precision of the numbers. */
export function tooNear(): InputError {
  return new InputError([
    {
      code: 'lines-too-near',
      key: 'regions',
      wrong: 'two drawn lines run so close together that the space between them cannot be meshed',
      remedy: 'move them apart, or let them share their corners',
    },
  ]);
}
