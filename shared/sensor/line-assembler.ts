/**
 * Bytes to pieces of text. A piece ends at CR, LF or before the next `$`: the dollar is reserved for the start of a
 * sentence, so a sentence whose line end was lost, or that another one broke into, costs only itself.
 */

/** NMEA 0183 allows 82 characters; real receivers send a good deal more. Beyond this it is not a sentence. */
const MAX_PIECE = 255;
const CR = 0x0d;
const LF = 0x0a;
const DOLLAR = 0x24;

export interface LineAssembler {
  /** Feeds bytes split anywhere and calls `piece` for each finished piece that is not blank. */
  push(bytes: Uint8Array, piece: (text: string) => void): void;
}

export function createLineAssembler(): LineAssembler {
  let text = '';
  const finish = (piece: (text: string) => void): void => {
    const whole = text;
    text = '';
    if (whole.trim() !== '') piece(whole);
  };
  return {
    push(bytes, piece) {
      for (const byte of bytes) {
        if (byte === CR || byte === LF) finish(piece);
        else {
          if (byte === DOLLAR) finish(piece);
          // One character past the limit is kept, so that an overlong piece can never pass for a whole sentence.
          if (text.length <= MAX_PIECE) text += String.fromCharCode(byte);
        }
      }
    },
  };
}

/** True if the piece was cut at the assembler's limit. */
export const isOverlong = (piece: string): boolean => piece.length > MAX_PIECE;
