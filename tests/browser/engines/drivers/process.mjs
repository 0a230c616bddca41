/** Programs that the drivers start, and what they wait for of them. */
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { createInterface } from 'node:readline';

/** A browser on a busy machine is not wrong: it may take this long to start. */
const PATIENCE_MS = 60_000;

/** Rejects when something did not happen in time. */
export function inTime(promise, what, patience = PATIENCE_MS) {
  let timer;
  const late = new Promise((_, reject) => {
    timer = setTimeout(() => reject(new Error(`${what} took longer than ${String(patience / 1000)} s`)), patience);
  });
  return Promise.race([promise, late]).finally(() => clearTimeout(timer));
}

/**
 * Starts a program; `stream` (1 standard output, 2 standard error, 3 a pipe of
 * its own) is read for the line that says it is ready.
 *
 * @returns `ready`, what `pattern` found in that line, and `stop`.
 */
export async function start(program, words, { stream, pattern, env = {} }) {
  const stdio = ['ignore', 'ignore', 'ignore', 'ignore'];
  stdio[stream] = 'pipe';
  const child = spawn(program, words, { stdio, env: { ...process.env, ...env } });
  const ended = new Promise((resolve, reject) => {
    child.once('error', reject);
    child.once('exit', (code) => resolve(code));
  });
  const found = new Promise((resolve, reject) => {
    createInterface({ input: child.stdio[stream] }).on('line', (line) => {
      const match = pattern.exec(line);
      if (match) resolve(match);
    });
    ended.then((code) => reject(new Error(`${program} ended with ${String(code)} before it was ready`)), reject);
  });
  const stop = async () => {
    if (child.exitCode === null && child.signalCode === null) {
      child.kill();
      await inTime(once(child, 'exit'), `the end of ${program}`);
    }
  };
  try {
    return { ready: await inTime(found, `the start of ${program}`), stop };
  } catch (reason) {
    await stop();
    throw reason;
  }
}
