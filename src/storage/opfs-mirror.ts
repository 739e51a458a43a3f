import type { MirrorFile, MirrorFolder } from './mirror-file.ts';

/**
 * The mirror's folder in the default bucket's private file system: another place than the database, so that one fault does not
 * take both. Only workers have access handles, and only one window at a time has a file's.
 */

interface AccessHandle {
  read(into: Uint8Array, options: { at: number }): number;
  write(bytes: Uint8Array, options: { at: number }): number;
  truncate(size: number): void;
  getSize(): number;
  flush(): void;
  close(): void;
}
type HandleOfFile = FileSystemFileHandle & { createSyncAccessHandle?(): Promise<AccessHandle> };

const FOLDER = 'evenline-mirror';

/** Null where the browser has no private file system with access handles. */
export async function opfsMirror(): Promise<MirrorFolder | null> {
  if (!('createSyncAccessHandle' in (globalThis.FileSystemFileHandle?.prototype ?? {}))) return null;
  try {
    const root = await navigator.storage.getDirectory();
    return folder(await root.getDirectoryHandle(FOLDER, { create: true }));
  } catch {
    return null;
  }
}

function folder(directory: FileSystemDirectoryHandle): MirrorFolder {
  return {
    names: async () => {
      const names: string[] = [];
      for await (const name of directory.keys()) names.push(name);
      return names;
    },
    open: async (name) => {
      const handle: HandleOfFile = await directory.getFileHandle(name, { create: true });
      try {
        return file((await handle.createSyncAccessHandle?.()) as AccessHandle);
      } catch (error) {
        if (error instanceof DOMException && error.name === 'NoModificationAllowedError') return null;
        throw error;
      }
    },
    remove: async (name) => {
      await directory.removeEntry(name);
    },
  };
}

function file(handle: AccessHandle): MirrorFile {
  return {
    size: () => handle.getSize(),
    readAll: () => {
      const bytes = new Uint8Array(handle.getSize());
      handle.read(bytes, { at: 0 });
      return bytes;
    },
    write: (bytes, at) => {
      const written = handle.write(bytes, { at });
      if (written !== bytes.byteLength) throw new DOMException('the file took only a part', 'QuotaExceededError');
    },
    truncate: (size) => handle.truncate(size),
    flush: () => handle.flush(),
    close: () => handle.close(),
  };
}
