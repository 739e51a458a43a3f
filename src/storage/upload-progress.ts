/** How far a run has come on its way to the server. Written by the outbox, shown everywhere. */
export interface UploadProgress {
  /** 'sending' only while the server answers; 'safe on server' only after it sealed this very journal. */
  readonly state: 'on this device' | 'sending' | 'safe on server' | 'blocked';
  /** Chunks the server confirmed. */
  readonly confirmed: number;
  /** The server has derived the result from the sealed journal. */
  readonly derived: boolean;
  /** Why nothing is being sent, for the person to read; null when all is well. */
  readonly blocked: { readonly code: string; readonly message: string } | null;
}

export const NOTHING_SENT: UploadProgress = { state: 'on this device', confirmed: 0, derived: false, blocked: null };
