import { expect, it } from 'vitest';
import { REAL_RATES } from '#shared/drive/drive-parameters.ts';
import { driveOnce, FAST_RATES } from '#tests/bench/accuracy/drive-once.ts';
import { SETTINGS, type Setting } from '#tests/bench/accuracy/settings.ts';
import { rms } from '#tests/bench/accuracy/statistics.ts';
import { SHORT_PACK } from '#tests/unit/drive/base-pack.ts';

/** The short course with the settings of the base drives: seven places within 12 km. */
function onShortCourse(setting: Setting): Setting {
  const { settings, car, wheel } = setting.pack;
  return { ...setting, pack: { ...SHORT_PACK, settings, car, wheel } };
}

const DRIVES = 40;

// The same seeds are the same navigators, tyres and surveys at either rate: what differs is the driver's hand and where slips fall.
it.each([
  ['base', 'ratio'],
  ['rough', 'ratio'],
] as const)(
  'the fast world of the bench and the one of the simulator agree: %s, %s',
  (setting, method) => {
    const ends = [FAST_RATES, REAL_RATES].map((rates) =>
      Array.from({ length: DRIVES }, (_, i) => driveOnce(onShortCourse(SETTINGS[setting]), method, i + 1, rates).finishMs),
    );
    const [fast, real] = ends as [number[], number[]];
    const apart = rms(fast.map((error, i) => error - (real[i] as number)));
    console.info(
      `${setting}: ${rms(fast).toFixed(0)} ms fast, ${rms(real).toFixed(0)} ms at real rates, ${apart.toFixed(0)} ms apart drive by drive`,
    );
    // An RMS over n drives is known to 1/√(2n): of two that share their seeds the quotient errs by less than √2 of that, twice.
    expect(Math.abs(Math.log(rms(fast) / rms(real)))).toBeLessThan((2 * Math.SQRT2) / Math.sqrt(2 * DRIVES));
    expect(apart).toBeLessThan(0.25 * rms(real));
    expect(apart).toBeGreaterThan(0);
  },
  120_000,
);
