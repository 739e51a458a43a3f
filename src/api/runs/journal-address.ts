/** Where the server gives out a run's journal as NDJSON; a plain link, so that the browser stores it as a file. */
export const journalAddress = (runId: string): string => `/api/runs/${runId}/journal`;
