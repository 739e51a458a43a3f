/** The cockpit's two places. Plain links: a page that loads whole is a page that works offline. */
export type CockpitPlace = { readonly page: 'list' } | { readonly page: 'attempt'; readonly attemptId: string };

export function placeOf(pathname: string): CockpitPlace {
  const attemptId = /^\/cockpit\/([^/]+)\/?$/u.exec(pathname)?.[1];
  return attemptId === undefined ? { page: 'list' } : { page: 'attempt', attemptId: decodeURIComponent(attemptId) };
}

export const attemptPath = (attemptId: string): string => `/cockpit/${encodeURIComponent(attemptId)}`;
export const runSheetPath = (runId: string): string => `/runs/${encodeURIComponent(runId)}`;
