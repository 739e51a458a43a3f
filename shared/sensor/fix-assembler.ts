import type { FixV1, Unnumbered } from '#shared/journal/observation.ts';
import type { GgaSentence, GllSentence, RmcSentence, VtgSentence } from './nmea-sentence.ts';
import type { UtcTracker } from './utc-tracker.ts';

/**
 * One fix for each epoch (time of day) of the receiver, out of the RMC, GGA, GLL and VTG sentences that belong to it.
 * - Position from GGA, else RMC, else GLL: GGA prints the most decimals. Speed and course from RMC, else VTG; a fix without
 *   either has no speed. Accuracy from GGA's HDOP, else null.
 * - Any of them saying "no fix" makes position and speed null.
 * - `at` is the arrival of the epoch's first sentence. The fix is given out once every kind of sentence seen in the two epochs
 *   before has come, or the next epoch begins, or `WAIT_US` has passed; what comes later for that epoch is dropped.
 * - VTG carries no time: it joins the epoch whose sentences lie nearest to it on the wire, learnt as a habit of the receiver,
 *   so that a lost sentence never shifts all speeds to a neighbouring epoch.
 */
export interface FixAssembler {
  take(sentence: Part, arrivalUs: number): readonly Fix[];
  /** Gives out a fix that has waited long enough for more. */
  expire(arrivalUs: number): readonly Fix[];
}

export type Fix = Unnumbered<FixV1>;
type Timed = RmcSentence | GgaSentence | GllSentence;
type Part = Timed | VtgSentence;
type Kind = Part['kind'];

/** Receivers send an epoch in one burst; 9600 baud carries about 290 characters in this time. */
const WAIT_US = 300_000;
/** Epochs by which one habit of VTG can outweigh the other. */
const HABIT = 4;

interface Epoch {
  readonly timeOfDayMs: number | null;
  readonly at: number;
  readonly kinds: Set<Kind>;
  rmc?: RmcSentence;
  gga?: GgaSentence;
  gll?: GllSentence;
  vtg?: VtgSentence;
  given: boolean;
}

export function createFixAssembler(utc: UtcTracker): FixAssembler {
  let epoch: Epoch | null = null;
  let expected: ReadonlySet<Kind> | null = null;
  let early: { readonly vtg: VtgSentence; readonly at: number } | null = null;
  let before: Iterable<Kind> = [];
  let timedAt = 0;
  let vtgAt: number | null = null;
  /** Positive: VTG follows the sentences of its epoch; negative: it goes before them. */
  let habit = 0;

  /** A VTG between two epochs tells by its gaps which one it belongs to. */
  const learnHabit = (vtg: number, arrivalUs: number): void => {
    habit = Math.max(-HABIT, Math.min(HABIT, habit + Math.sign(arrivalUs - vtg - (vtg - timedAt))));
  };

  const give = (): Fix[] => {
    if (epoch === null || epoch.given) return [];
    epoch.given = true;
    return [fixOf(epoch, utc)];
  };
  const giveIfComplete = (): Fix[] => (expected !== null && [...expected].every((kind) => epoch?.kinds.has(kind)) ? give() : []);

  const begin = (sentence: Timed, arrivalUs: number): Fix[] => {
    const given = give();
    // Two epochs back as well, so that a lost sentence does not make the next fix go out without its fellow.
    if (epoch !== null) expected = new Set([...epoch.kinds, ...before]);
    before = epoch?.kinds ?? [];
    if (vtgAt !== null) learnHabit(vtgAt, arrivalUs);
    epoch = { timeOfDayMs: sentence.timeOfDayMs, at: arrivalUs, kinds: new Set(), given: false };
    if (early !== null && arrivalUs - early.at <= WAIT_US) add(epoch, early.vtg);
    early = null;
    return given;
  };

  const takeVtg = (vtg: VtgSentence, arrivalUs: number): Fix[] => {
    vtgAt = epoch === null ? null : arrivalUs;
    if (epoch === null || habit < 0 || epoch.kinds.has('vtg') || arrivalUs - epoch.at > WAIT_US) {
      early = habit > 0 ? null : { vtg, at: arrivalUs };
      return [];
    }
    add(epoch, vtg);
    return giveIfComplete();
  };

  return {
    take(sentence, arrivalUs) {
      if (sentence.kind === 'vtg') return takeVtg(sentence, arrivalUs);
      const same = epoch !== null && epoch.timeOfDayMs === sentence.timeOfDayMs;
      // A receiver without any time repeats "null": there a second sentence of a kind begins the next epoch.
      const given = !same || (sentence.timeOfDayMs === null && epoch?.kinds.has(sentence.kind)) ? begin(sentence, arrivalUs) : [];
      if (epoch !== null) add(epoch, sentence);
      vtgAt = null;
      timedAt = arrivalUs;
      return [...given, ...giveIfComplete()];
    },
    expire: (arrivalUs) => (epoch !== null && arrivalUs - epoch.at > WAIT_US ? give() : []),
  };
}

function add(epoch: Epoch, part: Part): void {
  if (epoch.kinds.has(part.kind)) return;
  epoch.kinds.add(part.kind);
  if (part.kind === 'rmc') epoch.rmc = part;
  else if (part.kind === 'gga') epoch.gga = part;
  else if (part.kind === 'gll') epoch.gll = part;
  else epoch.vtg = part;
}

function fixOf(epoch: Epoch, utc: UtcTracker): Fix {
  const { rmc, gga, gll, vtg } = epoch;
  const noFix = [rmc, gga, gll].some((part) => part?.valid === false);
  const place = noFix ? undefined : [gga, rmc, gll].find((part) => part !== undefined && part.lat !== null);
  return {
    type: 'fix.v1',
    at: Math.round(epoch.at),
    via: 'nmea',
    lat: place?.lat ?? null,
    lon: place?.lon ?? null,
    speed: noFix ? null : (rmc?.speed ?? vtg?.speed ?? null),
    course: noFix ? null : (rmc?.course ?? vtg?.course ?? null),
    accuracy: noFix ? null : (gga?.accuracy ?? null),
    // A receiver without a fix may still be counting from a made-up date.
    utcMs: noFix ? null : utc.utcMs(epoch.timeOfDayMs, rmc?.dayMs ?? null),
  };
}
