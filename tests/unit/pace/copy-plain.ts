/** Through JSON and back, as a snapshot goes. */
export const copyPlain = <T>(value: T): T => JSON.parse(JSON.stringify(value)) as T;
