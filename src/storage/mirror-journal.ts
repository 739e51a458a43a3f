import type { RunHeader } from '#shared/journal/run-header.ts';
import type { KeptChunk } from './chunk-store.ts';
import type { MirrorFile, MirrorFolder } from './mirror-file.ts';
import { blockFrame, chunkFrame, headerFrame, type MirrorContent, readMirror } from './mirror-frames.ts';
import type { StoredBlock } from './stored-block.ts';

const SUFFIX = '.journal';
const AGAIN_MS = 50;

/** Mirrors of this device's runs. A file stays open from its first use until `release`, because only one window may hold it. */
export class MirrorJournal {
  private readonly open = new Map<string, OpenMirror>();

  constructor(private readonly folder: MirrorFolder) {}

  async runIds(): Promise<readonly string[]> {
    return (await this.folder.names()).filter((name) => name.endsWith(SUFFIX)).map((name) => name.slice(0, -SUFFIX.length));
  }

  holds(runId: string): boolean {
    return this.open.has(runId);
  }

  /** Null while another window holds the file; a window that just died may hold it for a moment, so it may be waited for. */
  async of(runId: string, patienceMs = 0): Promise<OpenMirror | null> {
    const known = this.open.get(runId);
    if (known !== undefined) return known;
    let file = await this.folder.open(runId + SUFFIX);
    for (let waited = 0; file === null && waited < patienceMs; waited += AGAIN_MS) {
      await new Promise((resume) => setTimeout(resume, AGAIN_MS));
      file = await this.folder.open(runId + SUFFIX);
    }
    if (file === null) return null;
    const mirror = new OpenMirror(file);
    this.open.set(runId, mirror);
    return mirror;
  }

  release(runId: string): void {
    this.open.get(runId)?.close();
    this.open.delete(runId);
  }

  async remove(runId: string): Promise<void> {
    this.release(runId);
    if ((await this.runIds()).includes(runId)) await this.folder.remove(runId + SUFFIX);
  }
}

export class OpenMirror {
  /** Seq that follows the last block in the file. */
  private nextSeq: number;
  private length: number;
  private readonly kept = new Set<number>();

  constructor(private readonly file: MirrorFile) {
    const content = this.content();
    this.nextSeq = after(content.blocks);
    // New frames go behind the last sound one; what is damaged behind it is read by `heal` first.
    this.length = content.soundBytes;
    for (const chunk of content.chunks) this.kept.add(chunk.n);
  }

  content(): MirrorContent {
    return readMirror(this.file.readAll());
  }

  damagedTail(): Uint8Array {
    return this.file.readAll().slice(this.length);
  }

  /** Empty, or without the header that must come first. */
  get blank(): boolean {
    return this.length === 0;
  }

  get end(): number {
    return this.nextSeq;
  }

  begin(header: RunHeader): void {
    this.add(headerFrame(header));
    this.file.flush();
  }

  /** Writes those of `blocks` that follow on; what it holds already is passed over. Flushed on return. */
  append(blocks: readonly StoredBlock[]): void {
    if (this.blank) return;
    for (const block of blocks) {
      if (block.firstSeq !== this.nextSeq) continue;
      this.add(blockFrame(block));
      this.nextSeq = block.firstSeq + block.count;
    }
    this.file.flush();
  }

  keepChunks(chunks: readonly KeptChunk[]): void {
    if (this.blank) return;
    for (const chunk of chunks) {
      if (this.kept.has(chunk.n)) continue;
      this.add(chunkFrame(chunk));
      this.kept.add(chunk.n);
    }
    this.file.flush();
  }

  /** Cuts the damaged tail off. */
  trim(): void {
    if (this.file.size() > this.length) this.file.truncate(this.length);
  }

  close(): void {
    this.file.close();
  }

  private add(bytes: Uint8Array): void {
    this.file.write(bytes, this.length);
    this.length += bytes.byteLength;
  }
}

const after = (blocks: readonly StoredBlock[]): number => {
  const last = blocks.at(-1);
  return last === undefined ? 0 : last.firstSeq + last.count;
};
