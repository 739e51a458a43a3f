import { describe, expect, it } from 'vitest';
import { countdownText, tickAt } from '#src/cockpit/start/countdown-figure.ts';

describe('countdown', () => {
  it('shows seconds alone in the last minute, and 0 exactly at the release', () => {
    expect([75.2, 60, 47.2, 9.001, 1, 0.0001, 0, -0.4].map(countdownText)).toEqual(['1:16', '60', '48', '10', '1', '1', '0', '0']);
  });

  it('ticks once a second from ten on, a last time at the release, and then no more', () => {
    expect([10.4, 10, 9.5, 1, 0.2, 0, -0.9, -1.2].map(tickAt)).toEqual([null, 10, 10, 1, 1, 0, 0, null]);
  });
});
