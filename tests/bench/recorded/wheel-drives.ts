import { readFileSync } from 'node:fs';
import { recorded } from '#tests/e2e/support/recorded-data.ts';
import { fromPlaceAt, geodesicPath, makePath } from './path.ts';
import { type Arrived, fix, inOrder, pulse, pulsesOfSpeed, type RecordedDrive, SPEED_PULSE_MM } from './recorded-drive.ts';

/** The shorter drives with a wheel: a test track, a car with four wheel speeds, a car's own speed beside a phone. */

const rows = (path: string): string[][] =>
  readFileSync(recorded(`wheel_gnss/${path}`), 'utf8')
    .split(/\r?\n/)
    .filter((line) => line !== '')
    .map((line) => line.split(/[,;]/));

/** Scale of the same kind of encoder on the same kind of van, as the highway taught it; not this car's own. */
const VAN_MM = 1000 / 20_180;
const NOMINAL_SIGMA = 0.01;

export function trackDrive(): RecordedDrive {
  const encoder = rows('track/_slash_parseEncoder.csv').slice(1);
  const zero = Number((encoder[0]?.[0] ?? '').slice(0, -6)) / 1000;
  const seconds = (stamp: string | undefined): number => Number((stamp ?? '').slice(0, -6)) / 1000 - zero;
  const speeds = rows('track/_slash_GPS_SparkFun_RearLeft_VTG.csv')
    .slice(1)
    .map((r) => ({ t: seconds(r[0]), speed: Number(r[11]) / 3.6 }));
  const places = rows('track/_slash_GPS_SparkFun_RearLeft_GGA.csv')
    .slice(1)
    .map((r) => ({ t: seconds(r[0]), lat: Number(r[10]), lon: Number(r[11]) }));
  const path = geodesicPath(places);
  const releaseT = (places[0]?.t ?? 0) + 1;
  return {
    name: 'track',
    truthBy: 'positions of its one receiver',
    truth: fromPlaceAt(path, releaseT),
    releaseT,
    stagedBehindM: 0,
    lengthM: 1200,
    arrived: inOrder([
      ...encoder.map((r) => pulse(seconds(r[0]), 0, Number(r[11]))),
      ...encoder.map((r) => pulse(seconds(r[0]), 1, -Number(r[10]))),
      ...speeds.map(({ t, speed }) => fix(t, { speed })),
    ]),
    wheels: [
      { name: 'right', channel: 0, mmPerPulse: VAN_MM, scaleSigma: NOMINAL_SIGMA },
      { name: 'left', channel: 1, mmPerPulse: VAN_MM, scaleSigma: NOMINAL_SIGMA },
    ],
    gnss: { speed: true, position: false },
    geometry: null,
  };
}

export function fourWheelsDrive(): RecordedDrive {
  const wheelRows = rows('four_wheels/wheel_speed.csv').slice(1);
  const zero = Number(wheelRows[0]?.[0]) - 1;
  const speedOf = (column: number) => wheelRows.map((r) => ({ t: Number(r[0]) - zero, speed: Number(r[column]) }));
  let metres = 0;
  const truthRows = rows('four_wheels/truth_pose.csv').slice(1);
  const path = makePath(
    truthRows.map((r, i) => {
      const before = truthRows[i - 1];
      // earth-centred chords of a metre: the height is in them, as it is in the wheel's
      if (before !== undefined) metres += Math.hypot(...[3, 4, 5].map((c) => Number(r[c]) - Number(before[c])));
      return { t: Number(r[0]) - zero, metres, lat: null, lon: null };
    }),
  );
  const releaseT = 2;
  return {
    name: 'four wheels',
    truthBy: 'survey-grade pose at 20 Hz',
    truth: fromPlaceAt(path, releaseT),
    releaseT,
    stagedBehindM: 0,
    lengthM: 900,
    arrived: inOrder([
      ...pulsesOfSpeed(speedOf(4), 0),
      ...pulsesOfSpeed(speedOf(3), 1),
      ...rows('four_wheels/gnss_ublox.csv')
        .slice(1)
        .map((r) => fix(Number(r[0]) - zero, { lat: Number(r[1]), lon: Number(r[2]), speed: Number(r[3]) })),
    ]),
    wheels: [
      { name: 'right', channel: 0, mmPerPulse: SPEED_PULSE_MM, scaleSigma: NOMINAL_SIGMA },
      { name: 'left', channel: 1, mmPerPulse: SPEED_PULSE_MM, scaleSigma: NOMINAL_SIGMA },
    ],
    gnss: { speed: true, position: true },
    geometry: null,
  };
}

/** The recording computer's clock is this far behind UTC (published beside the recording). */
const HOST_BEHIND_S = 0.54;

export function obdPhoneDrive(): RecordedDrive {
  const all = rows('obd_phone/trip_with_obd.txt');
  const zero = Number(all[0]?.[0]) / 1000;
  const host = (r: readonly string[]): number => Number(r[0]) / 1000 - zero;
  const car = all.filter((r) => r[1] === '010D').map((r) => ({ t: host(r), speed: Number(r[2]) / 3.6 }));
  const phone = all
    .filter((r) => r[1] === 'gps')
    .map((r) => {
      const [lat, lon, speed, utcMs] = (r[2] ?? '').split(':').map(Number) as [number, number, number, number];
      return { arrival: host(r), t: utcMs / 1000 - HOST_BEHIND_S - zero, lat, lon, speed };
    });
  const path = geodesicPath(phone);
  const moving = car.find((r) => r.speed > 0)?.t ?? 0;
  const releaseT = Math.max(1, moving - 1);
  const arrived: Arrived[] = [...pulsesOfSpeed(car, 0), ...phone.map(({ arrival, ...values }) => fix(arrival, values))];
  return {
    name: 'car speed, phone',
    truthBy: "the phone's own positions (not survey-grade)",
    truth: fromPlaceAt(path, releaseT),
    releaseT,
    stagedBehindM: 0,
    lengthM: 14_000,
    arrived: inOrder(arrived),
    wheels: [{ name: 'car speed', channel: 0, mmPerPulse: SPEED_PULSE_MM, scaleSigma: NOMINAL_SIGMA }],
    gnss: { speed: true, position: true },
    geometry: null,
  };
}
