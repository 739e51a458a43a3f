/** What the cockpit cannot do without, and the words for whoever has not got it. Chromium has all of it from 122 on. */
export function missingFeatures(): readonly string[] {
  const has = (name: string, present: boolean): readonly string[] => (present ? [] : [name]);
  return [
    ...has('a secure address (https, or localhost)', isSecureContext),
    ...has('storage buckets', 'storageBuckets' in navigator),
    ...has('files of its own', 'storage' in navigator && 'getDirectory' in navigator.storage),
    ...has('locks between windows', 'locks' in navigator),
    ...has('workers', typeof Worker === 'function'),
  ];
}

export const canReadSerial = (): boolean => 'serial' in navigator;
export const canReadLocation = (): boolean => 'geolocation' in navigator;
