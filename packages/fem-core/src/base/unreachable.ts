/** Closes a switch over a union: a kind added later fails to compile here until someone decides. */
export function unreachable(value: never): never {
  throw new Error(`no case for ${JSON.stringify(value)}`);
}
