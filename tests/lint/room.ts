export interface Room {
  readonly name: string;
  /** Globs of the files in this room, from the repository root; '!' leaves files out. */
  readonly files: readonly string[];
  /** A file of this room as others would name it, to plant breaches with. */
  readonly sample: string;
  /** Alias patterns under which others name this room's files. */
  readonly alias: readonly string[];
  /** What './…' may reach; the default is the room's whole folder. */
  readonly local?: readonly string[];
  readonly mayImport: readonly string[];
  /** Packages, each with its subpaths. */
  readonly packages: readonly string[];
}
