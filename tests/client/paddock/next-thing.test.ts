import { describe, expect, it } from 'vitest';
import { attemptToPrepare, nextThing } from '#src/paddock/event/next-thing.ts';
import { sampleAttempt, sampleEvents, sampleRun } from './sample-answers.ts';
import { IDS } from './sample-pack.ts';

const DIGEST = 'a'.repeat(64);
const fresh = { digest: DIGEST, storedMs: Date.UTC(2026, 5, 13, 6, 12, 40) };

function thing(attempt: Parameters<typeof sampleAttempt>[0], pack: typeof fresh | null) {
  const { events } = sampleEvents([sampleAttempt(attempt)]);
  const placed = attemptToPrepare(events, IDS.team);
  if (placed === null) throw new Error('no attempt');
  return nextThing(placed, pack, 6);
}

describe('the next thing to do', () => {
  it('is the release first, then the pack, then the cockpit', () => {
    expect(thing({ releaseMs: null }, null).act).toBe('set the release');
    expect(thing({}, null).act).toBe('store the pack');
    expect(thing({}, fresh).act).toBe('open the cockpit');
  });

  it('says release, pack, set-up and cautions in the words of the event', () => {
    expect(thing({}, fresh).readiness).toEqual([
      { words: 'release 10:42:00 Europe/Vienna', done: true },
      { words: 'pack stored 08:12', done: true },
      { words: 'set-up Road 19', done: true },
      { words: '6 cautions', done: null },
    ]);
  });

  it('asks for the pack again when the server would make another one now', () => {
    const changed = thing({ packDigest: 'c'.repeat(64) }, fresh);
    expect(changed.act).toBe('store the pack again');
    expect(changed.readiness[1]).toEqual({ words: 'pack on this tablet is out of date', done: false });
  });

  it('says why a pack cannot be made', () => {
    expect(thing({ packFault: 'The car has no wheel scale. Add one in the garage.', packDigest: null }, null)).toMatchObject({
      act: 'mend the pack',
      why: 'The car has no wheel scale. Add one in the garage.',
    });
  });

  it('leads to the run sheet once driven, and practice drives nothing', () => {
    expect(thing({ runs: [sampleRun] }, fresh).act).toBe('read the run sheet');
    expect(thing({ runs: [{ ...sampleRun, practice: true, counts: false }] }, fresh).act).toBe('open the cockpit');
  });

  it('needs no start order for practice', () => {
    const { events } = sampleEvents([sampleAttempt({ releaseMs: null })]);
    const placed = attemptToPrepare(
      events.map((event) => ({ ...event, practice: true })),
      IDS.team,
    );
    expect(placed && nextThing(placed, null, 6).act).toBe('store the pack');
  });
});

describe('the attempt to prepare', () => {
  const later = sampleAttempt({ id: IDS.afternoon, number: 2, releaseMs: Date.UTC(2026, 5, 13, 13) });

  it('is the earliest that was not driven', () => {
    expect(attemptToPrepare(sampleEvents([later, sampleAttempt()]).events, IDS.team)?.attempt.number).toBe(1);
    expect(attemptToPrepare(sampleEvents([later, sampleAttempt({ runs: [sampleRun] })]).events, IDS.team)?.attempt.number).toBe(2);
  });

  it('is the last one when all were driven, and none for another team', () => {
    const driven = [sampleAttempt({ runs: [sampleRun] }), { ...later, runs: [sampleRun] }];
    expect(attemptToPrepare(sampleEvents(driven).events, IDS.team)?.attempt.number).toBe(2);
    expect(attemptToPrepare(sampleEvents(driven).events, IDS.car)).toBeNull();
  });
});
