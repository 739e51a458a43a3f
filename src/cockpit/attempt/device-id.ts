const KEY = 'evenline.device';

/** This tablet, so that two tablets in one car make two runs. Random, kept here, nobody's secret. */
export function deviceId(): string {
  const kept = localStorage.getItem(KEY);
  if (kept !== null) return kept;
  const made = crypto.randomUUID();
  localStorage.setItem(KEY, made);
  return made;
}
