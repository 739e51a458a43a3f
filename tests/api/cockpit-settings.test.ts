import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cockpitSettingsRequestSchema } from '#shared/api/entries.ts';
import { eventsResponseSchema } from '#shared/api/events.ts';
import { packResponseSchema } from '#shared/api/pack.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, newMember, type Person } from './support/people.ts';
import { type Loaded, loadPractice } from './support/tablet.ts';

let house: House;
let person: Person;
let loaded: Loaded;
beforeAll(async () => {
  house = await openHouse();
  person = await newManager(house);
  loaded = await loadPractice(person);
});
afterAll(() => house.close());

const CHOSEN = {
  speedUnit: 'mph',
  scaleRule: 'ratio',
  tapLeadMs: { glass: -40, wired: 25 },
  tapLeadSigmaMs: { glass: 60, wired: 90 },
  tapScatterMs: 75,
  buttonSide: 'left',
  reserveS: 1.5,
} as const;

const path = () => `/api/entries/${loaded.entryId}/cockpit-settings`;
const load = async () => packResponseSchema.parse((await person.post(`/api/attempts/${loaded.attemptId}/pack`).expect(200)).body);
const entry = async () => {
  const { events } = eventsResponseSchema.parse((await person.get(`/api/teams/${person.teamId}/events`).expect(200)).body);
  return events[0]?.entries[0];
};

describe('cockpit settings', () => {
  it('of a new entry leave everything to the estimator, the lead unlearnt', async () => {
    expect(loaded.pack.settings).toMatchObject({ scaleRule: 'estimator', tapLeadMs: { glass: 0, wired: 0 } });
    expect(loaded.pack.settings).not.toHaveProperty('tapLeadSigmaMs');
    expect((await entry())?.settings).toEqual({ ...loaded.pack.settings, reserveS: 0 });
  });

  it('are saved as a whole and carried by the next pack, which has another digest', async () => {
    const saved = await person.patch(path(), CHOSEN).expect(200);
    expect(cockpitSettingsRequestSchema.parse(saved.body)).toEqual(CHOSEN);
    const changed = await entry();
    expect(changed?.settings).toEqual(CHOSEN);
    expect(changed?.attempts[0]?.packDigest).not.toBe(loaded.digest);
    const { reserveS, ...settings } = CHOSEN;
    const again = await load();
    expect(again.digest).toBe(changed?.attempts[0]?.packDigest);
    expect(again.pack).toEqual({ ...loaded.pack, settings, plan: { ...loaded.pack.plan, reserveS } });
  });

  it('set back give the pack that was there before', async () => {
    await person.patch(path(), { ...loaded.pack.settings, reserveS: 0 }).expect(200);
    expect((await load()).digest).toBe(loaded.digest);
  });

  it.each([
    ['a rule that does not exist', { scaleRule: 'magic' }, 'scaleRule'],
    ['a lead of two seconds', { tapLeadMs: { glass: 2000, wired: 0 } }, 'tapLeadMs.glass'],
    ['a lead known exactly', { tapLeadSigmaMs: { glass: 0, wired: 60 } }, 'tapLeadSigmaMs.glass'],
    ['no scatter at all', { tapScatterMs: 0 }, 'tapScatterMs'],
    ['a reserve below nothing', { reserveS: -1 }, 'reserveS'],
    ['a reserve of a minute', { reserveS: 60 }, 'reserveS'],
    ['a side that no car has', { buttonSide: 'middle' }, 'buttonSide'],
    ['something nobody asked for', { colour: 'red' }, ''],
  ])('refuse %s, name it, and change nothing', async (_what, wrong, where) => {
    const before = (await entry())?.settings;
    const refused = await person.patch(path(), { ...CHOSEN, ...wrong }).expect(400);
    expect(refused.body).toMatchObject({ code: 'INVALID_REQUEST', faults: [{ where }] });
    expect((await entry())?.settings).toEqual(before);
  });

  it('refuse what is not whole', async () => {
    const { reserveS: _reserve, ...rest } = CHOSEN;
    const refused = await person.patch(path(), rest).expect(400);
    expect(refused.body).toMatchObject({ faults: [{ where: 'reserveS' }] });
  });

  it('are the navigator’s too, not the driver’s, and nothing to another team', async () => {
    const navigator = await newMember(house, person.teamId, 'navigator');
    const driver = await newMember(house, person.teamId, 'driver');
    const stranger = await newManager(house, 'Another team');
    await driver.patch(path(), CHOSEN).expect(403);
    const none = await stranger.patch(path(), CHOSEN).expect(404);
    expect(none.body).toMatchObject({ code: 'NOT_FOUND' });
    expect((await load()).digest).toBe(loaded.digest);
    await navigator.patch(path(), CHOSEN).expect(200);
    expect((await load()).digest).not.toBe(loaded.digest);
  });
});
