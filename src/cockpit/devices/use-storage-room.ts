import { useCallback, useEffect, useState } from 'react';
import { askForRoom, ROOM_UNKNOWN, type RoomState } from './storage-room.ts';

export function useStorageRoom(): readonly [RoomState, () => void] {
  const [room, setRoom] = useState(ROOM_UNKNOWN);
  const ask = useCallback(() => {
    // A browser that refuses to tell leaves the item missing, which is what the grid check should show.
    askForRoom().then(setRoom, () => setRoom(ROOM_UNKNOWN));
  }, []);
  useEffect(ask, [ask]);
  return [room, ask];
}
