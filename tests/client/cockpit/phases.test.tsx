import { act, cleanup, fireEvent, screen as page } from '@testing-library/react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { formatTimeError } from '#shared/course/format.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { SessionScreen } from '#src/cockpit/attempt/session-screen.tsx';
import { FinishScreen } from '#src/cockpit/finish/finish-screen.tsx';
import { HOLD_MS } from '#src/cockpit/run/use-held-touch.ts';
import { Countdown, Held } from '#src/cockpit/start/countdown.tsx';
import { StoppedScreen } from '#src/cockpit/stop/stopped-screen.tsx';
import { webLocks } from '#src/storage/exclusive-lock.ts';
import { drawScreen } from './screen.tsx';

afterEach(cleanup);

function hold(key: HTMLElement): void {
  vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] });
  try {
    fireEvent.pointerDown(key);
    act(() => void vi.advanceTimersByTime(HOLD_MS));
  } finally {
    vi.useRealTimers();
  }
}

describe('start', () => {
  it('counts whole seconds down to the release', async () => {
    const screen = await drawScreen({ screen: <Countdown />, releaseInMs: 20_000 });
    const shown = (): string => screen.container.querySelector('.start-figure')?.textContent ?? '';
    const first = Number(shown());
    expect(first).toBe(Math.ceil(screen.opened.session.readout().toRelease ?? 0));
    await screen.pass(5000);
    expect(Number(shown())).toBe(first - 5);
    expect(page.getByText('the starter outranks this screen')).toBeTruthy();
  });

  it('says held when the car does not roll, with the time running on', async () => {
    const screen = await drawScreen({ screen: <Held />, releaseInMs: 10_000 });
    await screen.pass(17_000);
    expect(screen.opened.session.readout().phase).toBe('held');
    expect(screen.container.querySelector('.start-figure')?.textContent).toBe('0:07');
    expect(page.getByRole('button', { name: 'new release' })).toBeTruthy();
  });
});

describe('red flag', () => {
  it('tells the radio who and where, shows no advice, and goes on only by a held touch', { timeout: 20_000 }, async () => {
    const screen = await drawScreen({ screen: <StoppedScreen />, drivenS: 60 });
    act(() => void screen.opened.session.act({ type: 'run-stopped.v1' }));
    await screen.pass(100);
    const radio = screen.container.querySelector('.stop-radio')?.textContent ?? '';
    expect(radio).toMatch(new RegExp(`^Car ${screen.rig.pack.entry.number}, stopped at [\\d.]+ km, .* after .*, .* before .*\\.$`));
    const key = page.getByRole('button', { name: 'racing again' });
    fireEvent.click(key);
    expect(screen.opened.session.readout().phase).toBe('stopped');
    hold(key);
    expect(screen.opened.session.readout().phase).toBe('running');
  });
});

describe('finish', () => {
  it('says slow first, then the own error with its ± and the word unofficial, and ends by a held touch', { timeout: 20_000 }, async () => {
    const screen = await drawScreen({ screen: <FinishScreen />, drivenS: 115 });
    const { finish, phase } = screen.opened.session.readout();
    expect(phase).toBe('finished');
    if (finish === null) throw new Error('the drive should have finished');
    const { magnitude, word } = formatTimeError(finish.timeError, 2);
    expect(screen.container.textContent).toContain(`${magnitude} ${word} ±`);
    expect(screen.container.querySelector('.finish-slow')?.textContent).toMatch(/^slow/);
    expect(page.getByText(/unofficial/)).toBeTruthy();
    hold(page.getByRole('button', { name: 'end the run' }));
    expect(screen.opened.session.derive(runSheet).outcome).toBe('finished');
  });
});

/** The screens around the run are loaded beside it, which takes this browser double a while on a busy machine. */
const LOADED = { timeout: 20_000 };

describe('an open run', () => {
  it('goes from grid to countdown to held by itself, with nothing pressed', { timeout: 30_000 }, async () => {
    // This browser double has no locks, and sending is not the subject: the outbox waits in line for good.
    vi.spyOn(webLocks, 'wait').mockReturnValue(new Promise(() => undefined));
    const screen = await drawScreen({ screen: null, releaseInMs: 100_000 });
    const { session, storage } = screen.opened;
    screen.rerender(<SessionScreen session={session} store={storage.store} again={() => undefined} />);
    expect(await page.findByRole('region', { name: 'grid check' }, LOADED)).toBeTruthy();
    await screen.pass(50_000);
    expect(await page.findByText('the starter outranks this screen')).toBeTruthy();
    await screen.pass(56_000);
    expect(await page.findByText('held?')).toBeTruthy();
  });
});
