import type { DistanceUnit } from '#shared/units.ts';
import { shortName } from '#src/cockpit/view/names.ts';
import { distanceText, toGoText } from '#src/cockpit/view/words.ts';
import type { CourseNow } from '#src/run/run-session-contract.ts';

type Place = CourseNow['places'][number];

export interface Posts {
  readonly behind: Place | null;
  readonly ahead: Place | null;
}

/** The nearest places either side that the officials know too: those of the course book, never the crew's own. */
export function postsAround(places: readonly Place[], distanceM: number): Posts {
  const official = places.filter((place) => place.checkpoint.source === 'official');
  return {
    behind: official.findLast((place) => place.atM <= distanceM) ?? null,
    ahead: official.find((place) => place.atM > distanceM) ?? null,
  };
}

/** A sentence to be read into the radio as it stands. */
export function radioWords(carNumber: string, posts: Posts, distanceM: number, unit: DistanceUnit): string {
  const between = [
    posts.behind === null ? null : `${toGoText(distanceM - posts.behind.atM, unit)} after ${shortName(posts.behind.checkpoint.name)}`,
    posts.ahead === null ? null : `${toGoText(posts.ahead.atM - distanceM, unit)} before ${shortName(posts.ahead.checkpoint.name)}`,
  ].filter((words) => words !== null);
  return `Car ${carNumber}, stopped at ${[distanceText(distanceM, unit), ...between].join(', ')}.`;
}
