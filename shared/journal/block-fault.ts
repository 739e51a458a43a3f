/** What can be wrong with the bytes of a journal, where, and what to do about it. */
export interface BlockFault {
  readonly code: BlockFaultCode;
  /** Byte offset at which the faulty block begins: everything before it is sound. */
  readonly offset: number;
  /** First observation of the faulty block, where it can still be told. */
  readonly seq: number | null;
  readonly message: string;
}

export type BlockFaultCode = 'torn-tail' | 'not-a-block' | 'newer-format' | 'bad-checksum' | 'bad-record' | 'sequence-gap';

const ADVICE: Readonly<Record<BlockFaultCode, string>> = {
  'torn-tail': 'The last block was cut off while it was written. Keep everything before it and fetch or write the rest again.',
  'not-a-block': 'These bytes are no journal block. Take this part from another copy: the tablet, its mirror, or the server.',
  'newer-format': 'This journal was written by a newer Evenline. Update this one and read it again; the bytes are kept.',
  'bad-checksum': 'This block was damaged after it was written. Take it from another copy: the tablet, its mirror, or the server.',
  'bad-record': 'This block holds a record that cannot be read. Take it from another copy, or update Evenline.',
  'sequence-gap': 'A block is missing or repeated here. Fetch the missing part again from the tablet or the server.',
};

export function blockFault(code: BlockFaultCode, offset: number, seq: number | null, detail: string): BlockFault {
  return { code, offset, seq, message: `Byte ${offset}: ${detail}. ${ADVICE[code]}` };
}
