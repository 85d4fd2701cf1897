/** A file that a person handed over and that was not read yet. */
export interface LooseFile {
  readonly name: string;
  readonly size: number;
  readonly read: () => Promise<Uint8Array>;
}

export function looseFiles(files: Iterable<File>): LooseFile[] {
  return [...files].map((file) => ({
    name: file.name,
    size: file.size,
    read: async () => new Uint8Array(await file.arrayBuffer()),
  }));
}

/** Everything that was dropped; folders are gone through, hidden files passed over. */
export async function droppedFiles(transfer: DataTransfer): Promise<LooseFile[]> {
  // The list of items is emptied once the event is over: entries have to be taken at once.
  const entries = [...transfer.items].flatMap((item) => {
    const entry = item.kind === 'file' ? item.webkitGetAsEntry() : null;
    return entry === null ? [] : [entry];
  });
  if (entries.length === 0) return looseFiles(transfer.files);
  const files: File[] = [];
  for (const entry of entries) await gatherFiles(entry, files);
  return looseFiles(files);
}

async function gatherFiles(entry: FileSystemEntry, files: File[]): Promise<void> {
  if (entry.name.startsWith('.')) return;
  if (entry.isFile) {
    files.push(await new Promise((take, fail) => (entry as FileSystemFileEntry).file(take, fail)));
    return;
  }
  const reader = (entry as FileSystemDirectoryEntry).createReader();
  const next = (): Promise<FileSystemEntry[]> =>
    new Promise((take, fail) => reader.readEntries(take, fail));
  // A folder is handed out in parts, and an empty part ends it.
  for (let part = await next(); part.length > 0; part = await next()) {
    for (const inside of part) await gatherFiles(inside, files);
  }
}
