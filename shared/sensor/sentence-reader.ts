import type { NewObservation } from '#shared/journal/observation.ts';
import { never } from '#shared/result.ts';
import { createBoxClock } from './box-clock.ts';
import { judgeSentence } from './checksum.ts';
import { createClockSampler } from './clock-sampler.ts';
import { createFixAssembler } from './fix-assembler.ts';
import { createLineAssembler, isOverlong } from './line-assembler.ts';
import { decodeNmea, type NmeaSentence } from './nmea-sentence.ts';
import { decodePulse, isPulseSentence, type PulseSentence } from './pulse-sentence.ts';
import { createUtcTracker } from './utc-tracker.ts';

/** Bytes of one serial line to observations. Pure: the arrival is given, nothing is asked of a clock. */
export interface SentenceReader {
  /**
   * Feeds bytes, split anywhere, that arrived together at `arrivalUs` (session clock, microseconds).
   * A sentence counts as arrived with the byte that ends it (CR, LF or the next `$`). Never throws.
   *
   * `at` of pulses, buttons and PPS edges is the box's own instant mapped to the session clock (see box-clock); `at` of
   * fixes is the arrival of the epoch's first sentence (latency is estimated by whoever uses them); clock samples of
   * source `nmea` come from RMC and ZDA. An empty push with a later arrival gives out a fix that is still waiting.
   */
  push(bytes: Uint8Array, arrivalUs: number): NewObservation[];
  /** Sentences with a good checksum so far, understood or not. */
  readonly goodLines: number;
  /**
   * Pieces dropped so far: wrong, cut or missing checksum (NMEA without one is dropped too, as nothing vouches for it),
   * fields of our own sentences out of range, and text that is no sentence. None of them ever makes an observation.
   */
  readonly garbledLines: number;
  /** How often the box's clock was found to have begun again. */
  readonly boxRestarts: number;
}

export interface SentenceReaderOptions {
  /** An instant the present cannot precede, unix ms: dates over ten years older get the lost 1024 weeks back. */
  readonly dateFloorMs?: number | null;
  /** Rate of the session clock, by which arrivals are stamped; 1 on a real run. */
  readonly pace?: number;
}

export function createSentenceReader(options: SentenceReaderOptions = {}): SentenceReader {
  const lines = createLineAssembler();
  const box = createBoxClock(options.pace ?? 1);
  const decodeGnss = createGnssDecoder(options.dateFloorMs ?? null);
  let goodLines = 0;
  let garbledLines = 0;

  const readPiece = (piece: string, arrivalUs: number, out: NewObservation[]): void => {
    const body = isOverlong(piece) || judgeSentence(piece) !== 'ok' ? null : piece.slice(1, -3);
    const pulse = body !== null && isPulseSentence(body) ? decodePulse(body) : null;
    if (body === null || (isPulseSentence(body) && pulse === null)) {
      garbledLines += 1;
      return;
    }
    goodLines += 1;
    if (pulse !== null) out.push(pulseObservation(pulse, box.map(pulse.boxUs, arrivalUs)));
    else decodeGnss.take(decodeNmea(body), arrivalUs, out);
  };

  return {
    push(bytes, arrivalUs) {
      const out: NewObservation[] = [];
      decodeGnss.expire(arrivalUs, out);
      lines.push(bytes, (piece) => readPiece(piece, arrivalUs, out));
      return out;
    },
    get goodLines() {
      return goodLines;
    },
    get garbledLines() {
      return garbledLines;
    },
    get boxRestarts() {
      return box.restarts;
    },
  };
}

function pulseObservation(sentence: PulseSentence, at: number): NewObservation {
  switch (sentence.kind) {
    case 'wheel':
      return { type: 'pulse.v1', at, channel: sentence.channel, count: sentence.count, boxUs: sentence.boxUs };
    case 'button':
      return { type: 'button.v1', at, button: sentence.button, presses: sentence.presses, boxUs: sentence.boxUs };
    case 'pps':
      return { type: 'pps.v1', at, boxUs: sentence.boxUs };
    default:
      return never(sentence);
  }
}

function createGnssDecoder(dateFloorMs: number | null) {
  const utc = createUtcTracker(dateFloorMs);
  const fixes = createFixAssembler(utc);
  const clock = createClockSampler();
  // ZDA has no status of its own: without a fix it may state a made-up date.
  let hasFix = true;

  const sampleClock = (sentence: NmeaSentence, arrivalUs: number, out: NewObservation[]): void => {
    if (sentence.kind !== 'rmc' && sentence.kind !== 'zda') return;
    if (sentence.kind === 'rmc' ? sentence.valid !== true : !hasFix) return;
    const utcMs = sentence.dayMs === null ? null : utc.utcMs(sentence.timeOfDayMs, sentence.dayMs);
    if (utcMs !== null) out.push(...clock.take(utcMs, arrivalUs));
  };

  return {
    take(sentence: NmeaSentence | null, arrivalUs: number, out: NewObservation[]): void {
      if (sentence === null) return;
      if ('valid' in sentence && sentence.valid !== null) hasFix = sentence.valid;
      sampleClock(sentence, arrivalUs, out);
      if (sentence.kind !== 'zda') out.push(...fixes.take(sentence, arrivalUs));
    },
    expire: (arrivalUs: number, out: NewObservation[]): void => {
      out.push(...fixes.expire(arrivalUs));
    },
  };
}
