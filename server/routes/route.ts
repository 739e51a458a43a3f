import type { Request, Response } from 'express';
import { z } from 'zod';
import type { CookieOptions } from '#server/auth/cookie.ts';
import type { Action } from '#server/auth/permissions.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { idSchema } from '#shared/api/fields.ts';

/**
 * A route parses, calls one verb, replies. Routes are data: the application mounts them, and a test asks each of them
 * everything the permission table forbids.
 */
export interface Route {
  readonly method: 'get' | 'post' | 'put' | 'patch';
  /** Express path below /api. */
  readonly path: string;
  /** Row of the permission table its verb consults; the others are about nobody else's things. */
  readonly access: Action | 'public' | 'signed in';
  readonly body: 'none' | 'json' | 'octets';
  readonly handle: (call: Call) => Promise<Reply>;
}

export interface Call {
  readonly ctx: ServiceContext;
  readonly request: Request;
  readonly response: Response;
  readonly cookie: CookieOptions;
}

export type Reply = { readonly status: number; readonly json: unknown } | { readonly status: 204 } | { readonly sent: true };
export const answer = (json: unknown, status = 200): Reply => ({ status, json });
export const NO_CONTENT: Reply = { status: 204 };

/** @throws ServiceError INVALID_REQUEST with every field that is wrong. */
export function parseBody<T extends z.ZodType>(schema: T, request: Request): z.output<T> {
  const parsed = schema.safeParse(request.body);
  if (parsed.success) return parsed.data;
  const faults = parsed.error.issues.map((issue) => ({ code: issue.code, where: issue.path.join('.'), message: issue.message }));
  const [first] = faults;
  throw new ServiceError('INVALID_REQUEST', `Check what was entered: ${first?.where ?? ''} ${first?.message ?? ''}`.trim(), { faults });
}

/** An id in the path. What cannot be an id names nothing: 404, as for a foreign one. */
export function idParam(request: Request, name: string): string {
  const parsed = idSchema.safeParse(request.params[name]);
  if (!parsed.success) throw new ServiceError('NOT_FOUND', 'There is nothing at this address.');
  return parsed.data.toLowerCase();
}

const wholeNumber = z.coerce.number().int().min(0).max(1_000_000);

/** A whole number in the path or the query, or null where it is absent. */
export function numberFrom(text: unknown): number | null {
  if (text === undefined) return null;
  const parsed = wholeNumber.safeParse(text);
  if (!parsed.success) throw new ServiceError('NOT_FOUND', 'There is nothing at this address.');
  return parsed.data;
}
