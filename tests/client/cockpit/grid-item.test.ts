import { describe, expect, it } from 'vitest';
import { seconds, unixMs } from '#shared/units.ts';
import { clockItem, sensorItem, storageItem, wakeItem } from '#src/cockpit/grid/grid-item.ts';
import type { RunStatus } from '#src/run/run-session-contract.ts';
import type { PersistenceFacts } from '#src/storage/persistence.ts';

const official = (source: string, sigma: number, age: number) => ({
  official: { now: unixMs(0), sigma: seconds(sigma), source, age: seconds(age) },
  warnings: [],
});
const saved: RunStatus['storage'] = { state: 'saved', pending: 0, message: null, recovered: null };
const facts = (change: Partial<PersistenceFacts>): PersistenceFacts => ({
  persisted: true,
  usedBytes: 0,
  freeBytes: 4e9,
  freeHours: 100,
  ...change,
});

describe('what must be ready', () => {
  it('calls a clock checked only when it is sure, fresh and not the tablet’s own', () => {
    expect(clockItem({ official: null, warnings: [] }).ready).toBe(false);
    expect(clockItem(official('exchange', 0.004, 300))).toEqual({ ready: true, words: 'by server, ±8 ms, 5:00 ago' });
    expect(clockItem(official('exchange', 0.2, 300)).ready).toBe(false);
    expect(clockItem(official('exchange', 0.004, 7200)).ready).toBe(false);
    expect(clockItem(official('wall', 0.001, 1)).ready).toBe(false);
    const doubted = clockItem({ ...official('exchange', 0.004, 300), warnings: [{ code: 'clock-disagrees' }] });
    expect(doubted).toEqual({ ready: false, words: 'clocks disagree; by server, ±8 ms, 5:00 ago' });
  });

  it('calls storage ready only when the browser keeps it and ten hours fit', () => {
    expect(storageItem(facts({}), saved).ready).toBe(true);
    expect(storageItem(facts({ persisted: false }), saved)).toEqual({
      ready: false,
      words: 'the browser may clear it, room for over 99 h',
    });
    expect(storageItem(facts({ freeHours: 9.9 }), saved).ready).toBe(false);
    expect(storageItem(facts({ freeHours: null }), saved).ready).toBe(false);
    expect(storageItem(facts({}), { ...saved, state: 'failing', message: 'The disk is full.' })).toEqual({
      ready: false,
      words: 'The disk is full.',
    });
  });

  it('calls a sensor ready only while it is live', () => {
    const status = (state: 'live' | 'silent' | 'lost' | 'opening' | 'closed') =>
      sensorItem({ name: 'serial', state, goodLines: 7, garbledLines: 1, failure: null });
    expect(sensorItem(null).ready).toBe(false);
    expect(status('live')).toEqual({ ready: true, words: 'serial, 7 good, 1 garbled' });
    for (const state of ['silent', 'lost', 'opening', 'closed'] as const) expect(status(state).ready).toBe(false);
  });

  it('says what to do where the screen cannot be kept on', () => {
    expect(wakeItem('on').ready).toBe(true);
    expect(wakeItem('unsupported').words).toContain('settings');
  });
});
