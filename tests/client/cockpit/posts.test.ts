import { describe, expect, it } from 'vitest';
import type { Checkpoint } from '#shared/course/course-book.ts';
import { postsAround, radioWords } from '#src/cockpit/stop/posts.ts';

const place = (name: string, km: number, source: Checkpoint['source'] = 'official') => ({
  atM: km * 1000,
  checkpoint: {
    id: name,
    name,
    duty: 'scale',
    at: { text: String(km), unit: 'km' },
    source,
    side: null,
    note: '',
    position: null,
  } as const,
});
const places = [place('Start', 0), place('Chapel corner, inside', 27), place('White gate', 30, 'own'), place('Windmill fork', 36)];

describe('where the car stands, for the radio', () => {
  it('names the official places either side, never the crew’s own', () => {
    expect(radioWords('21', postsAround(places, 33_550), 33_550, 'km')).toBe(
      'Car 21, stopped at 33.550 km, 6.55 km after Chapel corner, 2.45 km before Windmill fork.',
    );
  });

  it('says what there is at either end of the course', () => {
    expect(radioWords('21', postsAround(places, -3), -3, 'km')).toBe('Car 21, stopped at −0.003 km, 3 m before Start.');
    expect(radioWords('21', postsAround(places, 36_400), 36_400, 'km')).toBe('Car 21, stopped at 36.400 km, 400 m after Windmill fork.');
  });
});
