import type { raceClasses } from '#server/db/schema/race-classes.ts';
import type { RaceClass } from '#shared/course/race-class.ts';

export function raceClassOf(row: typeof raceClasses.$inferSelect): RaceClass {
  return {
    id: row.id,
    name: row.name,
    targetTimeMs: row.targetTimeMs,
    sections: row.sections,
    cap: row.cap,
    floor: row.floor,
    aids: { wheel: row.aidWheel, gnssSpeed: row.aidGnssSpeed, gnssPosition: row.aidGnssPosition, dataLink: row.aidDataLink },
  };
}
