import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { createFixFreshness } from '#src/sensors/fix-freshness.ts';
import { makeGeolocation } from '#tests/client/sensors/geolocation-case.ts';
import { recordingListener } from '#tests/client/sensors/sensor-source-contract.ts';

describe('geolocation source', () => {
  beforeEach(() => void vi.useFakeTimers({ now: Date.UTC(2026, 0, 1) }));
  afterEach(() => void vi.useRealTimers());

  async function open(options: Partial<Parameters<typeof makeGeolocation>[0]> = {}) {
    const made = makeGeolocation({ granted: true, ...options });
    const heard = recordingListener();
    await made.source.open(heard.listener, { ask: false });
    return { ...made, ...heard };
  }

  it('asks for high accuracy and no remembered position', async () => {
    const { geolocation, source } = await open();
    expect(geolocation.asked).toMatchObject({ enableHighAccuracy: true, maximumAge: 0 });
    await source.close();
  });

  it('gives a fix at the instant it was taken, with its accuracy; what the browser does not know is null', async () => {
    const { geolocation, clock, wall, observations, source } = await open();
    await vi.advanceTimersByTimeAsync(1000);
    const taken = wall() - 400;
    geolocation.position({ speed: null, heading: Number.NaN, accuracy: 12.5 }, taken);
    expect(observations).toEqual([
      {
        type: 'fix.v1',
        at: clock.now() - 400_000,
        via: 'geolocation',
        lat: 45,
        lon: -30,
        speed: null,
        course: null,
        accuracy: 12.5,
        utcMs: taken,
      },
    ]);
    await source.close();
  });

  it('drops fixes over two seconds old and out of order, and counts them', async () => {
    const { geolocation, wall, observations, source, last } = await open();
    const now = wall();
    geolocation.position({}, now - 2100);
    geolocation.position({}, now - 500);
    geolocation.position({}, now - 700);
    geolocation.position({}, now - 500);
    geolocation.position({}, now - 400);
    expect(observations).toHaveLength(2);
    expect(last()).toMatchObject({ goodLines: 2, garbledLines: 3 });
    await source.close();
  });

  it('says when it is not allowed after all', async () => {
    const { geolocation, source, last } = await open();
    geolocation.error(1);
    expect(last()).toMatchObject({ state: 'lost', failure: { code: 'denied' } });
    geolocation.error(2);
    expect(last()).toMatchObject({ state: 'lost', failure: { code: 'lost' } });
    await source.close();
  });
});

describe('freshness of fixes', () => {
  it('a tablet clock that is 40 s fast does not cost the receiver', () => {
    const freshness = createFixFreshness();
    const ages = Array.from({ length: 20 }, (_, i) => freshness.age(i * 1000, i * 1000 + 40_000 + (i % 3) * 200));
    expect(ages.slice(0, 5)).toEqual([null, null, null, null, null]);
    expect(ages.slice(5).every((age) => age !== null && age < 500)).toBe(true);
  });

  it('a receiver that falls further and further behind stays refused', () => {
    const freshness = createFixFreshness();
    expect(Array.from({ length: 20 }, (_, i) => freshness.age(i * 100, i * 1000 + 3000)).every((age) => age === null)).toBe(true);
  });

  it('a stamp ahead of the clock has no age', () => expect(createFixFreshness().age(5000, 4000)).toBe(0));
});
