import { act, cleanup, fireEvent, screen as page } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import type { ClockV1 } from '#shared/journal/observation.ts';
import { GridCheck } from '#src/cockpit/grid/grid-check.tsx';
import { drawScreen, pointerDown, type Screen } from './screen.tsx';

afterEach(cleanup);

/** The event's clock is this much ahead of the tablet's own, which is all that is known before. */
const AHEAD_MS = 1_870;

async function open(): Promise<Screen> {
  const screen = await drawScreen({ screen: <GridCheck side="right" />, releaseInMs: 600_000 });
  fireEvent.click(page.getByRole('button', { name: 'by touch' }));
  await act(() => import('#src/cockpit/grid/touch-clock.tsx'));
  await screen.pass(0);
  return screen;
}

/** Touches as each second of a clock begins that is `ahead` of the device's wall: `early` by a habit, and scattered. */
async function touchAlong(screen: Screen, n: number, aheadMs: number, earlyMs: number, seed: number): Promise<void> {
  const random = createRandom(seed, 'touches');
  const { world } = screen.rig;
  await screen.pass(1000 - ((world.wall() + aheadMs) % 1000) + 500);
  for (let i = 0; i < n; i++) {
    await screen.pass(500);
    const stamp = world.now() - screen.opened.originMs - earlyMs + random.gauss(20);
    pointerDown(page.getByRole('button', { name: 'each second' }), stamp);
    await screen.pass(500);
  }
}

const samples = async (screen: Screen): Promise<ClockV1[]> =>
  (await screen.rig.journal(screen.opened.session.header.runId)).filter((o): o is ClockV1 & { seq: number } => o.type === 'clock.v1');

describe('the official clock by touch', () => {
  it('is taken from a row of touches, its second confirmed, and journalled with how sure it is', async () => {
    const screen = await open();
    const set = page.getByRole<HTMLButtonElement>('button', { name: 'set' });
    await touchAlong(screen, 9, AHEAD_MS, 0, 1);
    expect(page.getByRole('status').textContent).toBe('9 of 10');
    expect(set.disabled).toBe(true);
    await touchAlong(screen, 12, AHEAD_MS, 0, 2);
    expect(page.getByRole('status').textContent).toContain('it read');
    // what is proposed goes by the tablet's clock; the person knows better
    fireEvent.click(page.getByRole('button', { name: '1 s later' }));
    fireEvent.click(page.getByRole('button', { name: '1 s later' }));
    fireEvent.click(set);
    await screen.pass(100);
    const [sample] = await samples(screen);
    expect(sample).toMatchObject({ source: 'tap' });
    expect(sample?.uncertaintyMs).toBeGreaterThan(30);
    expect(sample?.uncertaintyMs).toBeLessThan(40);
    const off = (screen.opened.session.readout().official?.now ?? 0) - screen.rig.world.wall() - AHEAD_MS;
    expect(Math.abs(off)).toBeLessThan(2 * (sample?.uncertaintyMs ?? 0));
  });

  it('is freed of what the person anticipates by, once that was shown along the flash', async () => {
    const screen = await open();
    fireEvent.click(page.getByRole('button', { name: 'our own flash first' }));
    const toFlash = screen.rig.world.wall() - screen.opened.session.clock.now() / 1000;
    await touchAlong(screen, 15, -toFlash, 80, 3);
    const [, early] = /^you touch (\d+) ms early: taken off$/.exec(page.getByRole('status').textContent ?? '') ?? [];
    // two sigma of a median of fifteen: 2 · 1.25 · 20 ms / √15
    expect(Math.abs(Number(early) - 80)).toBeLessThan(13);
    await touchAlong(screen, 12, 0, 80, 4);
    fireEvent.click(page.getByRole('button', { name: 'set' }));
    await screen.pass(100);
    const [sample] = await samples(screen);
    expect(sample?.uncertaintyMs).toBeLessThan(20);
    expect(Math.abs((screen.opened.session.readout().official?.now ?? 0) - screen.rig.world.wall())).toBeLessThan(30);
  });
});
