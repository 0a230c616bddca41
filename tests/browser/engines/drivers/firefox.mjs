/**
 * Firefox over WebDriver BiDi (W3C), which it speaks itself: nothing stands
 * between it and this client.
 */
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

import WebSocket from 'ws';

import { inTime, start } from './process.mjs';

/** A browser under test asks nobody for anything but the page. */
const QUIET = {
  'app.normandy.enabled': false,
  'app.update.enabled': false,
  'browser.aboutwelcome.enabled': false,
  'browser.newtabpage.enabled': false,
  'browser.safebrowsing.malware.enabled': false,
  'browser.safebrowsing.phishing.enabled': false,
  'browser.shell.checkDefaultBrowser': false,
  'browser.startup.homepage': 'about:blank',
  'browser.startup.page': 0,
  'datareporting.policy.dataSubmissionEnabled': false,
  'extensions.update.enabled': false,
  'network.captive-portal-service.enabled': false,
  'network.connectivity-service.enabled': false,
  'services.settings.server': 'data:,',
  'toolkit.telemetry.enabled': false,
};

async function emptyProfile() {
  const folder = await mkdtemp(join(tmpdir(), 'eigenledger-firefox-'));
  const lines = Object.entries(QUIET).map(([name, value]) => `user_pref(${JSON.stringify(name)}, ${JSON.stringify(value)});`);
  await writeFile(join(folder, 'user.js'), `${lines.join('\n')}\n`);
  return folder;
}

/** Commands and their answers, matched by number. */
async function connected(address) {
  const socket = new WebSocket(address);
  const waiting = new Map();
  await inTime(new Promise((resolve, reject) => {
    socket.once('open', resolve);
    socket.once('error', reject);
  }), 'the connection to Firefox');
  const give = (id, settle) => {
    const found = waiting.get(id);
    waiting.delete(id);
    if (found !== undefined) settle(found);
  };
  socket.on('message', (data) => {
    const { id, type, result, error, message } = JSON.parse(String(data));
    if (type === 'success') give(id, ({ resolve }) => resolve(result));
    if (type === 'error') give(id, ({ reject }) => reject(new Error(`${error}: ${message}`)));
  });
  socket.on('close', () => {
    for (const id of [...waiting.keys()]) give(id, ({ reject }) => reject(new Error('Firefox closed the connection')));
  });
  let last = 0;
  const send = (method, params) => new Promise((resolve, reject) => {
    last += 1;
    waiting.set(last, { resolve, reject });
    socket.send(JSON.stringify({ id: last, method, params }));
  });
  return { send, close: () => socket.close() };
}

async function session(address) {
  const { send, close } = await connected(address);
  await send('session.new', { capabilities: {} });
  const { contexts: [{ context }] } = await send('browsingContext.getTree', {});
  return {
    open: (url) => send('browsingContext.navigate', { context, url, wait: 'complete' }),
    async evaluate(expression) {
      const { type, result, exceptionDetails } = await send('script.evaluate', {
        expression, target: { context }, awaitPromise: true,
      });
      if (type !== 'success') throw new Error(`Firefox: ${exceptionDetails.text}`);
      return result.value ?? null;
    },
    async end() {
      await send('session.end', {}).catch(() => undefined);
      close();
    },
  };
}

/** Starts Firefox without a window; `open`, `evaluate` (to a text or null) and `close`. */
export async function startFirefox(program) {
  const profile = await emptyProfile();
  const remove = () => rm(profile, { recursive: true, force: true, maxRetries: 5 });
  try {
    const words = ['--headless', '--no-remote', '--profile', profile, '--remote-debugging-port', '0'];
    const { ready, stop } = await start(program, words, { stream: 2, pattern: /BiDi listening on (ws:\/\/\S+)/ });
    const { open, evaluate, end } = await session(`${ready[1]}/session`);
    const close = async () => {
      await end();
      await stop();
      await remove();
    };
    return { open, evaluate, close };
  } catch (reason) {
    await remove();
    throw reason;
  }
}
