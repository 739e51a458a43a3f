/** Who asks. Every service verb is told, and decides. */
export type Actor =
  | { readonly kind: 'anonymous' }
  | { readonly kind: 'user'; readonly userId: string }
  /** A tablet with an upload grant: may append runs of that one entry, and nothing else. */
  | { readonly kind: 'grant'; readonly grantId: string; readonly entryId: string; readonly userId: string };

export const ANONYMOUS: Actor = { kind: 'anonymous' };
