#!/usr/bin/env node
import { main } from './main.js';

// A reader that has seen enough (`gapwright solve FILE | head`) is no fault; files are still written in full.
for (const stream of [process.stdout, process.stderr]) {
  stream.on('error', (error: NodeJS.ErrnoException) => {
    if (error.code !== 'EPIPE') process.exitCode = 1;
  });
}

const interruption = new AbortController();
// The first interrupt stops at the next safe point and cleans up; a second one does not wait.
process.on('SIGINT', () => {
  if (interruption.signal.aborted) process.exit(130);
  interruption.abort();
});

const status = await main(process.argv.slice(2), {
  stdout: process.stdout,
  stderr: process.stderr,
  env: process.env,
  signal: interruption.signal,
});
process.exitCode ||= status;
