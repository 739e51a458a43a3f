import { type CockpitSettingsRequest, cockpitSettingsRequestSchema } from '#shared/api/entries.ts';
import { request } from '#src/api/request.ts';

/** The crew's choices for every attempt of an entry, as a whole. */
export const setCockpitSettings = (entryId: string, settings: CockpitSettingsRequest): Promise<CockpitSettingsRequest> =>
  request(cockpitSettingsRequestSchema, `/entries/${entryId}/cockpit-settings`, { method: 'PATCH', body: settings });
