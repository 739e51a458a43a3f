import type { MirrorFile, MirrorFolder } from '#src/storage/mirror-file.ts';

/**
 * A disk that outlives its windows, with the rules that matter here: one window at a time holds a file, and what was not
 * flushed is gone after a kill.
 */
export class MemoryDisk {
  private readonly flushed = new Map<string, Uint8Array>();
  private readonly holders = new Map<string, MemoryWindow>();

  /** A window's view of the disk. */
  window(): MemoryWindow {
    return new MemoryWindow(this);
  }

  contentOf(name: string): Uint8Array {
    return this.flushed.get(name) ?? new Uint8Array();
  }

  overwrite(name: string, bytes: Uint8Array): void {
    this.flushed.set(name, bytes.slice());
  }

  names(): readonly string[] {
    return [...this.flushed.keys()];
  }

  remove(name: string): void {
    this.flushed.delete(name);
  }

  hold(name: string, by: MemoryWindow): boolean {
    if (this.holders.has(name)) return false;
    this.holders.set(name, by);
    if (!this.flushed.has(name)) this.flushed.set(name, new Uint8Array());
    return true;
  }

  letGo(name: string): void {
    this.holders.delete(name);
  }

  letGoAll(by: MemoryWindow): void {
    for (const [name, holder] of this.holders) if (holder === by) this.holders.delete(name);
  }
}

export class MemoryWindow implements MirrorFolder {
  /** Set to make every write fail as a full disk does. */
  full = false;
  private killed = false;

  constructor(private readonly disk: MemoryDisk) {}

  names = async (): Promise<readonly string[]> => this.disk.names();

  /** What a dead window still had under way must not take the file from the next one. */
  open = async (name: string): Promise<MirrorFile | null> => (!this.killed && this.disk.hold(name, this) ? this.file(name) : null);

  remove = async (name: string): Promise<void> => this.disk.remove(name);

  /** The window dies: its files are free again, and nothing it still holds reaches the disk. */
  kill(): void {
    this.killed = true;
    this.disk.letGoAll(this);
  }

  private file(name: string): MirrorFile {
    let now = this.disk.contentOf(name).slice();
    let open = true;
    const alive = (): void => {
      if (!open) throw new DOMException('the file is closed', 'InvalidStateError');
    };
    return {
      readAll: () => {
        alive();
        return now.slice();
      },
      size: () => now.byteLength,
      write: (bytes, at) => {
        alive();
        if (this.full) throw new DOMException('no room', 'QuotaExceededError');
        const grown = new Uint8Array(Math.max(now.byteLength, at + bytes.byteLength));
        grown.set(now);
        grown.set(bytes, at);
        now = grown;
      },
      truncate: (size) => {
        now = now.slice(0, size);
      },
      flush: () => {
        alive();
        if (!this.killed) this.disk.overwrite(name, now);
      },
      close: () => {
        if (!this.killed) {
          this.disk.overwrite(name, now);
          this.disk.letGo(name);
        }
        open = false;
      },
    };
  }
}
