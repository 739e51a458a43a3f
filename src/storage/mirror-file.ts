/** The little that the mirror asks of a file. Synchronous, as a worker's access handle is: nothing comes between write and flush. */
export interface MirrorFile {
  readAll(): Uint8Array;
  size(): number;
  write(bytes: Uint8Array, at: number): void;
  truncate(size: number): void;
  /** Returns when the bytes are on the disk. */
  flush(): void;
  close(): void;
}

export interface MirrorFolder {
  names(): Promise<readonly string[]>;
  /** Creates it where missing; null while another window holds it. */
  open(name: string): Promise<MirrorFile | null>;
  remove(name: string): Promise<void>;
}
