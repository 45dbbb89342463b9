import { isHiddenName } from '@/lib/work/intake/file-name'

/** What was dropped or chosen, folders opened. Names are paths below what was dropped, as the server keeps them. */
export interface ChosenFile {
  name: string
  file: File
}

export interface Chosen {
  files: ChosenFile[]
  /** Names of hidden files, which operating systems put into folders, and of what could not be opened. */
  left: string[]
}

/** Manifests first, so that they are known when files are matched; then by name, so that a candidate's bands come together. */
function inOrder(chosen: ChosenFile[], left: string[]): Chosen {
  const rank = ({ name }: ChosenFile) => (/\.csv$/i.test(name) ? 0 : 1)
  const files = chosen.filter(({ name }) => !isHiddenName(name))
  const hidden = chosen.flatMap(({ name }) => (isHiddenName(name) ? name : []))
  files.sort((a, b) => rank(a) - rank(b) || (a.name < b.name ? -1 : a.name > b.name ? 1 : 0))
  return { files, left: [...left, ...hidden] }
}

/** From a file chooser; `webkitRelativePath` is set when a folder was chosen. */
export function chosenFiles(list: Iterable<File>): Chosen {
  return inOrder(
    [...list].map((file) => ({ name: file.webkitRelativePath || file.name, file })),
    [],
  )
}

/** From a drop. Entries must be asked for before the first await: the browser empties the list then. */
export async function droppedFiles(transfer: DataTransfer): Promise<Chosen> {
  const entries = [...transfer.items].flatMap((item) => (item.kind === 'file' ? (item.webkitGetAsEntry?.() ?? []) : []))
  if (entries.length === 0) return chosenFiles(transfer.files)
  const found: ChosenFile[] = []
  const left: string[] = []
  for (const entry of entries) await collect(entry, found, left)
  return inOrder(found, left)
}

async function collect(entry: FileSystemEntry, found: ChosenFile[], left: string[]): Promise<void> {
  const name = entry.fullPath.replace(/^\//, '')
  try {
    if (entry.isFile) {
      const file = await new Promise<File>((resolve, reject) => (entry as FileSystemFileEntry).file(resolve, reject))
      found.push({ name, file })
    } else {
      for (const child of await listFolder(entry as FileSystemDirectoryEntry)) await collect(child, found, left)
    }
  } catch {
    left.push(name)
  }
}

/** A folder is read in parts (Chromium: 100 entries each) until one is empty. */
async function listFolder(folder: FileSystemDirectoryEntry): Promise<FileSystemEntry[]> {
  const reader = folder.createReader()
  const entries: FileSystemEntry[] = []
  for (;;) {
    const part = await new Promise<FileSystemEntry[]>((resolve, reject) => reader.readEntries(resolve, reject))
    if (part.length === 0) return entries
    entries.push(...part)
  }
}
