import { hasRecorded } from '#tests/e2e/support/recorded-data.ts';
import type { Bench } from './figures.ts';
import { gpxDrive, motorwayDrive, plainDrive, townDrive } from './recorded/gnss-drives.ts';
import { highwayDrives } from './recorded/highway.ts';
import type { RecordedDrive } from './recorded/recorded-drive.ts';
import { type Row, rowsOf, tableOf } from './recorded/table.ts';
import { fourWheelsDrive, obdPhoneDrive, trackDrive } from './recorded/wheel-drives.ts';

/**
 * Every recorded drive through the engine: what it showed of distance and time error, each second, against the best path there is of
 * the same drive. Touches are late by 80 ms, which the pack knows, and scatter by 100 ms; eight seeds, root mean square; one where quick.
 */
export const bench: Bench = ({ quick }) => {
  if (!hasRecorded) return { text: 'skipped: no recordings at ../shared/data', json: { skipped: 'no recordings' } };
  const drives: RecordedDrive[] = [
    ...highwayDrives(),
    trackDrive(),
    fourWheelsDrive(),
    obdPhoneDrive(),
    motorwayDrive(),
    townDrive(),
    plainDrive(),
    gpxDrive(),
  ];
  const json: Record<string, readonly Row[]> = {};
  const texts = drives.map((drive) => {
    const rows = rowsOf(drive, quick);
    json[drive.name] = rows;
    return tableOf(drive, rows);
  });
  return { text: texts.join('\n\n'), json };
};
