import { formatDistance, formatDuration, formatTimeError, roundedDigits } from '#shared/course/format.ts';
import type { Band, Hold, Readout, TapVerdict, Warning } from '#shared/pace/readout.ts';
import { type DistanceUnit, METRES_PER_MILE } from '#shared/units.ts';
import { sureText } from '#src/components/sure-text.ts';

/** The cockpit's short words. A magnitude and a word, never a bare sign. */

const ERROR_WORD: Readonly<Record<Band['side'], string>> = {
  level: 'level',
  late: 'late',
  early: 'early',
  below: 'below plan',
  above: 'above plan',
};

export const sideWord = (side: Band['side']): string => ERROR_WORD[side];

/** `steps` is a whole count of tenths or hundredths, either sign. */
export function stepsAsText(steps: number, decimals: 1 | 2): string {
  const per = decimals === 1 ? 10 : 100;
  const whole = Math.abs(steps);
  return `${Math.floor(whole / per)}.${String(whole % per).padStart(decimals, '0')}`;
}

/** `3.4 late`, `0.0 level`. */
export function errorText(seconds: number, decimals: 1 | 2): string {
  const { magnitude, word } = formatTimeError(seconds, decimals);
  return `${magnitude} ${word}`;
}

/** Distance counted down to a place: metres below 1 km, thousandths of a mile below half a mile. */
export function toGoText(m: number, unit: DistanceUnit): string {
  const ahead = Math.max(0, m);
  if (unit === 'km' && ahead < 1000) return `${roundedDigits(ahead, 0)} m`;
  const decimals = unit === 'mi' && ahead < METRES_PER_MILE / 2 ? 3 : 2;
  return `${formatDistance(ahead, unit, decimals)} ${unit}`;
}

/** Official distance, always to the same decimals so that it does not jump. */
export const distanceText = (m: number, unit: DistanceUnit): string => `${formatDistance(m, unit, 3)} ${unit}`;

/** `0:56`, `12:05`, `1:02:05`; whole seconds, cut. */
export const durationText = (seconds: number): string => formatDuration(Math.floor(Math.max(0, seconds)));

/** The run goes on and the band is silent: the engine gives no advice behind an escort. */
export const isEscorted = ({ phase, timeError, band }: Pick<Readout, 'phase' | 'timeError' | 'band'>): boolean =>
  phase === 'running' && timeError !== null && band === null;

/** What stands beside the hold speed. */
export function holdWords(hold: Hold): readonly string[] {
  switch (hold.kind) {
    case 'none':
      return [];
    case 'hold':
      return ['hold'];
    case 'cannot be made up':
      return ['cannot be', 'made up,', `${roundedDigits(hold.by, 1)} s short`];
    case 'cannot be given back':
      return ['cannot be', 'given back,', `${roundedDigits(hold.by, 1)} s over`];
  }
}

/** How long the present speed may still be held. */
export const noReturnWords = ({ noReturn }: Pick<Readout, 'noReturn'>): string =>
  noReturn === null ? '' : `at this speed late for good in ${roundedDigits(noReturn.in, 0)} s`;

/** What became of the last touch, short enough to be read out. */
export function verdictWords(tap: TapVerdict): string {
  const off = Math.abs(tap.moved);
  const moved = off < 1000 ? `${roundedDigits(off, 0)} m` : `${roundedDigits(off / 1000, 1)} km`;
  switch (tap.verdict) {
    case 'provisional':
      return 'touched';
    case 'used':
      return `moved ${moved}; ${scaleWords(tap)}`;
    case 'doubted':
      return `${moved} odd, not used; use it?`;
    case 'no place near':
      return 'no place near, not used';
    case 'repeated':
      return 'touched twice, first one counts';
    case 'voided':
      return 'undone';
  }
}

function scaleWords(tap: TapVerdict): string {
  if (tap.scaleKept !== null || tap.scaleAfter === tap.scaleBefore) return 'scale kept';
  const percent = (tap.scaleAfter / tap.scaleBefore - 1) * 100;
  if (roundedDigits(percent, 2) === '0.00') return 'scale holds';
  return `scale ${percent < 0 ? 'down' : 'up'} ${roundedDigits(percent, 2)}\u00a0%`;
}

/** What is wrong now, one short line each. A missed place is the verdict line's to tell. */
export function warningWords(readout: Readout): readonly string[] {
  return readout.warnings.map((warning) => warningText(warning, readout)).filter((words) => words !== '');
}

function warningText(warning: Warning, readout: Readout): string {
  switch (warning.code) {
    case 'wheel-lost':
      return readout.source === 'gnss' ? `GNSS now, ${sureText(readout.sigma)}` : 'wheel lost';
    case 'pulses-filled':
      return 'pulses missing: filled in';
    case 'second-wheel':
      return 'second wheel now';
    case 'wheels-disagree':
      return 'the wheels disagree';
    case 'wheel-back':
      return `wheel back: ${roundedDigits(Math.abs(warning.moved), 0)}\u00a0m ${warning.moved < 0 ? 'less' : 'more'}`;
    case 'wheel-slipping':
      return 'wheel slips: by GNSS';
    case 'wheel-losing':
      return 'wheel misses: by GNSS';
    case 'gnss-lost':
      return 'GNSS lost';
    case 'no-distance':
      return 'no distance: touch at the next place';
    case 'clock-unchecked':
      return 'clock unchecked';
    case 'over-limit':
      return 'over the limit';
    case 'over-cap':
      return 'over the class cap';
    case 'newer-evenline':
      return 'needs a newer Evenline';
    case 'slept':
      return 'the tablet slept';
    case 'clock-disagrees':
      return 'clocks disagree: check';
    case 'checkpoint-missed':
      return '';
  }
}
