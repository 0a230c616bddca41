/**
 * WebKitGTK's MiniBrowser over WebDriver (W3C), on a display of its own that
 * nobody sees.
 */
import { createServer } from 'node:net';
import { once } from 'node:events';

import { inTime, start } from './process.mjs';

async function freePort() {
  const server = createServer().listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address();
  server.close();
  await once(server, 'close');
  return port;
}

async function command(address, method, path, body) {
  const answer = await fetch(`${address}${path}`, {
    method,
    ...(body !== undefined && { body: JSON.stringify(body), headers: { 'Content-Type': 'application/json' } }),
  });
  const { value } = await answer.json();
  if (!answer.ok) throw new Error(`WebKit: ${value.error}: ${value.message}`);
  return value;
}

/** The driver says nothing when it is ready: it is asked until it answers. */
async function answering(address) {
  for (;;) {
    const status = await command(address, 'GET', '/status').catch(() => null);
    if (status !== null) return;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}

async function session(address, browser) {
  const options = { 'webkitgtk:browserOptions': { binary: browser, args: ['--automation'] } };
  const { sessionId } = await command(address, 'POST', '/session', { capabilities: { alwaysMatch: options } });
  const path = `/session/${sessionId}`;
  return {
    open: (url) => command(address, 'POST', `${path}/url`, { url }),
    evaluate: (expression) => command(address, 'POST', `${path}/execute/sync`, { script: `return ${expression};`, args: [] }),
    end: () => command(address, 'DELETE', path).catch(() => undefined),
  };
}

/** Starts MiniBrowser; `open`, `evaluate` (to a text or null) and `close`. */
export async function startWebKit({ driver, browser, display }) {
  const stops = [];
  const close = async () => {
    for (const stop of stops.toReversed()) await stop();
  };
  try {
    const screen = await start(display, ['-displayfd', '3', '-nolisten', 'tcp'], { stream: 3, pattern: /^(\d+)$/ });
    stops.push(screen.stop);
    const port = await freePort();
    const { stop } = await start('/bin/sh', ['-c', 'echo started >&2; exec "$0" "$@"', driver, `--port=${String(port)}`], {
      stream: 2,
      pattern: /^started$/,
      env: { DISPLAY: `:${screen.ready[1]}`, GDK_BACKEND: 'x11' },
    });
    stops.push(stop);
    const address = `http://127.0.0.1:${String(port)}`;
    await inTime(answering(address), 'the start of WebKitWebDriver');
    const { open, evaluate, end } = await inTime(session(address, browser), 'the start of MiniBrowser');
    stops.push(end);
    return { open, evaluate, close };
  } catch (reason) {
    await close();
    throw reason;
  }
}
