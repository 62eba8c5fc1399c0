/** What was dropped: files, those inside folders too, and the name of the folder if it was one. */
export interface Dropped {
  readonly files: File[];
  readonly folder: string | null;
}

/** The files of a drop. In Electron a folder stays one entry: its path says everything. */
export async function droppedFiles(transfer: DataTransfer): Promise<Dropped> {
  const whole = [...transfer.files];
  const entries = [...transfer.items]
    .map((item) => item.webkitGetAsEntry())
    .filter((entry) => entry !== null);
  if ('dwellbook' in window || entries.length === 0) return { files: whole, folder: null };
  const files: File[] = [];
  for (const entry of entries) await collect(entry, files);
  const folder = entries.find((entry) => entry.isDirectory)?.name ?? null;
  files.sort((a, b) => a.name.localeCompare(b.name, 'en', { numeric: true }));
  return { files, folder };
}

async function collect(entry: FileSystemEntry, into: File[]): Promise<void> {
  if (entry.name.startsWith('.')) return;
  if (entry.isFile) {
    const file = await new Promise<File>((resolve, reject) =>
      (entry as FileSystemFileEntry).file(resolve, reject),
    );
    into.push(file);
    return;
  }
  const reader = (entry as FileSystemDirectoryEntry).createReader();
  for (;;) {
    const some = await new Promise<FileSystemEntry[]>((resolve, reject) =>
      reader.readEntries(resolve, reject),
    );
    if (some.length === 0) return; // a reader gives a hundred at a time
    for (const each of some) await collect(each, into);
  }
}
