import type { BrowserContext, Page } from 'playwright';
import type { FakeSerialCommand } from '#tests/e2e/support/fake-serial.ts';
import { FAKE_SERIAL_CHANNEL } from '#tests/e2e/support/fake-serial-script.ts';
import { inSteps, type TimedText } from '#tests/e2e/support/timed-text.ts';

/**
 * The far end of the scripted serial port: a page of its own in the same origin, so that reloading or killing the page under
 * test does not stop the box. What is sent while no worker listens is lost, as on a real wire.
 */
export interface SerialFeeder {
  send(command: Exclude<FakeSerialCommand, { kind: 'bytes' }>): Promise<void>;
  write(text: string): Promise<void>;
  /** Streams at `rate` times its own pace, from now. */
  stream(texts: readonly TimedText[], options: { readonly rate: number }): PacedStream;
  close(): Promise<void>;
}

export interface PacedStream {
  /** Resolves when all is written, or after `stop`. */
  readonly done: Promise<void>;
  /** Stream time written so far, ms. */
  readonly positionMs: number;
  stop(): void;
}

const STEP_MS = 25;

/** @param url any small document of the application's origin, such as an icon */
export async function openSerialFeeder(context: BrowserContext, url: string): Promise<SerialFeeder> {
  const page = await context.newPage();
  await page.goto(url);
  const write = (text: string): Promise<void> => post(page, text);
  return {
    write,
    send: (command) => post(page, command),
    stream: (texts, { rate }) => paced(texts, rate, write),
    close: () => page.close(),
  };
}

/** Text goes as bytes. One channel a page, kept: a channel made and dropped at once may never deliver. */
function post(page: Page, message: string | FakeSerialCommand): Promise<void> {
  return page.evaluate(
    ([name, sent]) => {
      const scope = globalThis as typeof globalThis & { feederChannel?: BroadcastChannel };
      scope.feederChannel ??= new BroadcastChannel(name);
      const command = typeof sent === 'string' ? { kind: 'bytes', bytes: Uint8Array.from(sent, (c) => c.charCodeAt(0)) } : sent;
      scope.feederChannel.postMessage(command);
    },
    [FAKE_SERIAL_CHANNEL, message] as const,
  );
}

function paced(texts: readonly TimedText[], rate: number, write: (text: string) => Promise<void>): PacedStream {
  const steps = inSteps(texts, STEP_MS * rate);
  let next = 0;
  let positionMs = 0;
  let running = true;
  const run = async (): Promise<void> => {
    const begin = performance.now();
    while (running && next < steps.length) {
      const due = (performance.now() - begin) * rate;
      let text = '';
      for (let step = steps[next]; step !== undefined && step.atMs <= due; step = steps[next]) {
        text += step.text;
        positionMs = step.atMs;
        next += 1;
      }
      if (text !== '') await write(text);
      await new Promise((resolve) => setTimeout(resolve, STEP_MS));
    }
  };
  const done = run();
  return {
    done,
    get positionMs() {
      return positionMs;
    },
    stop: () => {
      running = false;
    },
  };
}
