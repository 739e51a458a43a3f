import { printedMetres } from '#shared/course/convert.ts';
import type { Pack } from '#shared/course/pack.ts';
import type { SheetPlace } from './run-sheet-view.tsx';

export function sheetPlace(pack: Pack): SheetPlace {
  return {
    unit: pack.courseBook.unit,
    timeZone: pack.event.timeZone,
    zones: [...pack.courseBook.zones, ...pack.crewZones].map(({ from, to, limit }) => ({
      from: printedMetres(from),
      to: printedMetres(to),
      limit: `${limit.text} ${limit.unit}`,
    })),
  };
}

export const runTitle = (pack: Pack): string => `${pack.event.name}, number ${pack.entry.number}, attempt ${pack.attempt.number}`;
