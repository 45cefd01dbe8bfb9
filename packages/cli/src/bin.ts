#!/usr/bin/env node
import './fused-products.js';
import { main } from './main.js';

// A reader that has seen enough (`gapwright solve FILE | head`) is no fault; files are still written in full.
process.stderr.on('error', () => {});
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') return;
  process.stderr.write(`standard output cannot be written to: ${error.message}\n`);
  process.exitCode = 2;
});

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
