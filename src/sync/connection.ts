/** What the browser believes about the connection: a hint, never a proof. The only reader of `navigator.onLine`. */
export const believesOnline = (): boolean => navigator.onLine;
