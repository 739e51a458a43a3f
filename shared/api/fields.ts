import { z } from 'zod';

/** Field types shared by the resources. Requests are strict and bounded; answers tolerate fields of a newer server. */
export const idSchema = z.uuid();
/** Instants are whole unix milliseconds, from 2000 to 2100. */
export const instantSchema = z.number().int().min(946_684_800_000).max(4_102_444_800_000);
/** An instant as an answer carries it. */
export const unixMsSchema = z.number().int();
export const nameSchema = z.string().trim().min(1).max(120);
/** SHA-256, lower-case hex. */
export const digestSchema = z.string().regex(/^[0-9a-f]{64}$/);
export const ZERO_DIGEST = '0'.repeat(64);

/** True where the runtime's own time zone data knows the zone. */
function isTimeZone(zone: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone });
    return true;
  } catch {
    return false;
  }
}
export const timeZoneSchema = z.string().max(64).refine(isTimeZone, 'must be an IANA time zone, for example Europe/Vienna');
