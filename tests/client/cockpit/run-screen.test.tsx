import { act, cleanup, fireEvent, screen as page } from '@testing-library/react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { formatTimeError } from '#shared/course/format.ts';
import { RunScreen } from '#src/cockpit/run/run-screen.tsx';
import { HOLD_MS } from '#src/cockpit/run/use-held-touch.ts';
import { drawScreen, pointerDown, type Screen } from './screen.tsx';

afterEach(cleanup);

const underWay = (drivenS: number, tap = true): Promise<Screen> => drawScreen({ screen: <RunScreen side="right" />, drivenS, tap });

const text = (screen: Screen, selector: string): string => screen.container.querySelector(selector)?.textContent ?? '';

describe('run screen', () => {
  it('shows what the engine says: error and word, hold speed, next place, distance', async () => {
    const screen = await underWay(90);
    const readout = screen.opened.session.readout();
    const { band, hold, next } = readout;
    if (band === null || hold.kind !== 'hold' || next === null) throw new Error('the drive should be under way');
    const words = { level: 'level', below: 'below plan', above: 'above plan', late: 'late', early: 'early' } as const;
    expect(text(screen, '.band-word')).toBe(words[band.side]);
    if (band.side !== 'level') expect(text(screen, '.band-figure')).toBe(formatTimeError(band.magnitude, band.decimals).magnitude);
    expect(Number(text(screen, '.hold-speed'))).toBe(Math.round(hold.speed * 3.6));
    expect(page.getByRole('heading', { name: next.checkpoint.name })).toBeTruthy();
  });

  it('moves figures every frame without a React commit', async () => {
    const screen = await underWay(90);
    const before = { commits: screen.commits(), distance: text(screen, '.panel-here') };
    for (let i = 0; i < 5; i++) await screen.pass(200);
    expect(text(screen, '.panel-here')).not.toBe(before.distance);
    expect(screen.commits()).toBe(before.commits);
  });

  it('journals a touch at the event’s own instant and shows it in the same task', async () => {
    const screen = await underWay(60, false);
    const { session, originMs } = screen.opened;
    const stamp = screen.rig.world.now() - originMs - 43.21;
    const button = page.getByRole('button', { name: /^touch / });
    pointerDown(button, stamp);
    expect(button.getAttribute('data-touched')).toBe('true');
    await screen.pass(500);
    const tap = (await screen.rig.journal(session.header.runId)).find((o) => o.type === 'tap.v1');
    expect(tap).toMatchObject({ at: session.clock.at(stamp), input: 'glass', checkpoint: session.readout().next?.checkpoint.id });
  });

  it('undoes a used touch by the key beside the verdict', async () => {
    const screen = await underWay(110);
    for (let i = 0; i < 300 && page.queryByRole('button', { name: 'undo' }) === null; i++) await screen.pass(1000);
    const used = screen.opened.session.readout().lastTap;
    expect(used?.verdict).toBe('used');
    fireEvent.click(page.getByRole('button', { name: 'undo' }));
    await screen.pass(100);
    expect(screen.opened.session.readout().lastTap).toMatchObject({ seq: used?.seq, verdict: 'voided' });
    expect(page.getByText('undone')).toBeTruthy();
  });

  it('stops only after a whole second of touch', async () => {
    const screen = await underWay(60);
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] });
    try {
      const key = page.getByRole('button', { name: 'Stopped' });
      fireEvent.pointerDown(key);
      act(() => void vi.advanceTimersByTime(HOLD_MS - 1));
      fireEvent.pointerUp(key);
      act(() => void vi.advanceTimersByTime(HOLD_MS));
      expect(screen.opened.session.readout().phase).toBe('running');
      fireEvent.pointerDown(key);
      expect(key.getAttribute('data-holding')).toBe('true');
      act(() => void vi.advanceTimersByTime(HOLD_MS));
    } finally {
      vi.useRealTimers();
    }
    expect(screen.opened.session.readout().phase).toBe('stopped');
  });

  it('lets a second window look and not touch', async () => {
    const screen = await drawScreen({ screen: <RunScreen side="right" />, drivenS: 60, asReader: true });
    expect(screen.opened.session.role).toBe('reader');
    await screen.pass(1000);
    expect(text(screen, '.band-word')).not.toBe('');
    expect(page.getByText('reading from the other window').closest('button')?.disabled).toBe(true);
    expect(page.getByRole<HTMLButtonElement>('button', { name: 'Stopped' }).disabled).toBe(true);
  });
});
