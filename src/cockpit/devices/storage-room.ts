/** How much the browser lets this origin keep, and whether it promises not to clear it. */
export interface RoomState {
  readonly persisted: boolean;
  readonly freeBytes: number | null;
}

export const ROOM_UNKNOWN: RoomState = { persisted: false, freeBytes: null };

/** Asks for the promise as well: an installed application usually gets it, and asking again is harmless. */
export async function askForRoom(): Promise<RoomState> {
  const persisted = (await navigator.storage.persisted()) || (await navigator.storage.persist());
  const { quota, usage } = await navigator.storage.estimate();
  return { persisted, freeBytes: quota === undefined || usage === undefined ? null : quota - usage };
}
