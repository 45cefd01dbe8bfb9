import type { ChildProcess } from 'node:child_process';
import { spawn } from 'node:child_process';
import { createInterface } from 'node:readline';
import type { Timer } from './timing.js';

/** Figures of an answer by name, as text. */
export type Answer = Readonly<Record<string, string>>;

/** Another process that does as a line says and answers by a line; see peers/peer.hpp. */
export interface Peer {
  readonly ask: (...words: readonly (string | number)[]) => Promise<Answer>;
  /** Ends the process, and waits until it has. */
  readonly end: () => Promise<void>;
}

export function startPeer(command: string, args: readonly string[] = []): Peer {
  const child: ChildProcess = spawn(command, args, { env: peerEnvironment(), stdio: ['pipe', 'pipe', 'inherit'] });
  const { stdin, stdout } = child;
  if (stdin === null || stdout === null) throw new Error(`${command}: no pipes`);
  const lines = createInterface({ input: stdout })[Symbol.asyncIterator]();
  const ended = new Promise<void>((resolve, reject) => {
    child.once('exit', () => resolve());
    child.once('error', reject);
  });
  ended.catch(() => {}); // told by the line that does not come
  return {
    ask: async (...words) => {
      const asked = words.join(' ');
      stdin.write(`${asked}\n`);
      const { value, done } = await lines.next();
      if (done === true) throw new Error(`${command} ended at "${asked}"`);
      if (value.startsWith('error')) throw new Error(`${command}, "${asked}": ${value.slice(6)}`);
      return Object.fromEntries(value.split(' ').map((pair) => pair.split('=')));
    },
    end: () => {
      stdin.end();
      return ended;
    },
  };
}

/** Does the work, and ends the processes however it went. */
export async function withPeers(peers: readonly Peer[], work: () => Promise<void>): Promise<void> {
  try {
    await work();
  } finally {
    await Promise.all(peers.map((peer) => peer.end()));
  }
}

/** One thread; and the BLAS library's own choice of kernels, which these two variables would overrule. */
function peerEnvironment(): NodeJS.ProcessEnv {
  const { OPENBLAS_CORETYPE: _core, OPENBLAS_L2_SIZE: _cache, ...rest } = process.env;
  return { ...rest, OPENBLAS_NUM_THREADS: '1', OMP_NUM_THREADS: '1' };
}

/** A timer of a peer's verb; `last` is its last answer. */
export interface PeerTimer {
  readonly timer: Timer;
  readonly last: () => Answer;
}

export function timerOfPeer(peer: Peer, verb: string, ...words: readonly (string | number)[]): PeerTimer {
  let answer: Answer = {};
  return {
    timer: async (times) => {
      answer = await peer.ask(verb, times, ...words);
      return Number(answer.ms);
    },
    last: () => answer,
  };
}
