import { z } from 'zod';

/**
 * GET /api/time: the server's two stamps of a clock exchange, unix ms. With the client's t1 and t4 the offset is
 * ((t2 - t1) + (t3 - t4)) / 2 and the round trip (t4 - t1) - (t3 - t2). Source: RFC 5905 section 8.
 */
export const timeResponseSchema = z.object({ t2: z.number(), t3: z.number() });
export type TimeResponse = z.infer<typeof timeResponseSchema>;
