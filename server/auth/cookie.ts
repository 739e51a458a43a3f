/** The sign-in cookie. `__Host-` needs TLS, so plain HTTP on loopback uses a plain name. */
export interface CookieOptions {
  readonly secure: boolean;
}

const MAX_AGE_S = 90 * 24 * 3600;
const nameOf = (options: CookieOptions): string => (options.secure ? '__Host-evenline' : 'evenline');

export function authCookie(token: string, options: CookieOptions): string {
  return `${nameOf(options)}=${token}; Path=/; HttpOnly; SameSite=Lax; Max-Age=${MAX_AGE_S}${options.secure ? '; Secure' : ''}`;
}

export function clearedAuthCookie(options: CookieOptions): string {
  return `${nameOf(options)}=; Path=/; HttpOnly; SameSite=Lax; Max-Age=0${options.secure ? '; Secure' : ''}`;
}

/** The token in a Cookie header, or null. A token that cannot be one of ours is no token. */
export function readAuthCookie(header: string | undefined, options: CookieOptions): string | null {
  const prefix = `${nameOf(options)}=`;
  const pair = header
    ?.split(';')
    .map((part) => part.trim())
    .find((part) => part.startsWith(prefix));
  const token = pair?.slice(prefix.length) ?? '';
  return /^[A-Za-z0-9_-]{43}$/.test(token) ? token : null;
}

/** The token of an `Authorization: Bearer` header: undefined without the header, null where it is malformed. */
export function readBearer(header: string | undefined): string | null | undefined {
  if (header === undefined) return undefined;
  return /^Bearer ([A-Za-z0-9_-]{43})$/.exec(header)?.[1] ?? null;
}
