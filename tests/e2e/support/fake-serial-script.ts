import { readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import type { BrowserContext } from 'playwright';
import { transformWithOxc } from 'vite';

/**
 * Puts the scripted serial port into a browser: on pages by an init script, in the serial worker in front of its own script.
 * Init scripts do not reach workers. Page, worker and feeder talk over a BroadcastChannel of the origin.
 */

export const FAKE_SERIAL_CHANNEL = 'evenline-fake-serial';
/** The built worker, or the source that the development server gives out. */
const WORKER_SCRIPT = /\/serial-worker(-(?!core)[^/]*)?\.(js|ts)(\?.*)?$/;

async function installSource(): Promise<string> {
  const path = resolve(process.cwd(), 'tests/e2e/support/fake-serial.ts');
  const { code } = await transformWithOxc(readFileSync(path, 'utf8'), path, { target: 'es2022', sourcemap: false });
  return code.replace(/^export /gm, '').replace(/^\/\/# sourceMappingURL.*$/m, '');
}

/** A page remembers the grant as a browser does; a worker is only started once there is one. */
const MEMORY = `
  const key = 'fake-serial-granted';
  // a worker has no such storage, a blank page may not reach it
  const storage = (() => { try { return globalThis.localStorage; } catch { return undefined; } })();
  const memory = storage === undefined
    ? { get: () => true, grant() {} }
    : { get: () => storage.getItem(key) === 'yes', grant: () => storage.setItem(key, 'yes') };`;

export async function fakeSerialScript(): Promise<string> {
  return `{
  ${await installSource()}
  ${MEMORY}
  const channel = new BroadcastChannel('${FAKE_SERIAL_CHANNEL}');
  const listen = (handler) => channel.addEventListener('message', (event) => handler(event.data));
  const serial = installFakeSerial({ listen }, memory);
  Object.defineProperty(navigator, 'serial', { value: serial, configurable: true });
}\n`;
}

/** Call before the context's first page. Works under a strict content security policy, a service worker and offline. */
export async function scriptSerial(context: BrowserContext): Promise<void> {
  const script = await fakeSerialScript();
  await context.addInitScript({ content: script });
  await context.route(WORKER_SCRIPT, async (route) => {
    const response = await route.fetch();
    await route.fulfill({ response, body: script + (await response.text()) });
  });
}
