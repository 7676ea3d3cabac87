/** Caption files that are read; everything a camera or recorder writes counts as a clip and is judged by its content. */
const CAPTIONS = /\.(?:vtt|srt)$/i
const CLIPS = /\.(?:mp4|m4v|mov|qt|mkv|webm|avi|mts|m2ts|ts|3gp|mpg|mpeg|mp3|m4a|wav|ogg|oga|flac|aac)$/i

/** For the file picker. Phones grey out what is not named here. */
export const ACCEPTED = 'video/*,audio/*,.mp4,.m4v,.mov,.mkv,.webm,.avi,.mts,.m2ts,.ts,.3gp,.vtt,.srt'

export interface Picked { clips: File[], captions: File[], others: File[] }

/** Sorts what was dropped: clips, caption files, and the rest (pictures, `.DS_Store`), which is left out and named. */
export function sortPicked(files: readonly File[]): Picked {
  const picked: Picked = { clips: [], captions: [], others: [] }
  for (const file of files) {
    if (CAPTIONS.test(file.name)) picked.captions.push(file)
    else if (CLIPS.test(file.name) || /^(?:video|audio)\//.test(file.type)) picked.clips.push(file)
    else if (!file.name.startsWith('.')) picked.others.push(file)
  }
  return picked
}

/** All files of a drop, those inside folders too. */
export async function filesOf(transfer: DataTransfer): Promise<File[]> {
  // Entries must be taken before the first wait: the browser empties the list when the event is over.
  const entries = [...transfer.items].flatMap(item => item.kind === 'file' ? [item.webkitGetAsEntry?.() ?? item.getAsFile()] : [])
  const files = await Promise.all(entries.map(entry => entry instanceof File ? [entry] : entry ? filesIn(entry) : []))
  return files.flat()
}

async function filesIn(entry: FileSystemEntry): Promise<File[]> {
  if (entry.isFile) return [await new Promise<File>((resolve, reject) => (entry as FileSystemFileEntry).file(resolve, reject))]
  const reader = (entry as FileSystemDirectoryEntry).createReader()
  const files: File[] = []
  for (;;) {
    // Browsers answer a hundred at a time, and an empty list at the end.
    const some = await new Promise<FileSystemEntry[]>((resolve, reject) => reader.readEntries(resolve, reject))
    if (!some.length) return files
    for (const inner of some) files.push(...await filesIn(inner))
  }
}
