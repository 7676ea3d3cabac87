import { defineStore } from 'pinia'
import { browserOutside } from '~/utils/upload/browserOutside'
import { FileUpload } from '~/utils/upload/fileUpload'
import { type Footage, followFates } from '~/utils/upload/fates'
import { type Interrupted, readInterrupted, writeInterrupted } from '~/utils/upload/interrupted'
import { sortPicked } from '~/utils/upload/picking'
import { Slots } from '~/utils/upload/slots'
import type { UploadProgress, UploadState } from '~/utils/upload/types'

export interface UploadPlace { sessionId: string, buildId: string }
export interface UploadEntry extends UploadPlace, UploadProgress {
  id: number
  name: string
  sizeBytes: number
  kind: 'clip' | 'captions'
  trackId: string | null
  /** Why the file is of no use though all of it arrived; empty until that is known, or when it is fine. */
  broken: string
}

/** Two files side by side hide the waits of beginning and ending; more would only share the same line. */
const FILES_AT_ONCE = 2
/** Parts in flight over all files: at most this many slices are in memory for hashing. */
const PARTS_AT_ONCE = 4
const OVER = new Set<UploadState>(['done', 'double'])
const MOST_CAPTION_BYTES = 5 * 1024 * 1024

/** Uploads under way. They outlive the page that began them and go on while one moves about the site. */
export const useUploads = defineStore('uploads', () => {
  const api = useApi()
  const entries = ref<UploadEntry[]>([])
  const interrupted = ref<Interrupted[]>([])
  const running = new Map<number, FileUpload>()
  const slots = { files: new Slots(FILES_AT_ONCE), parts: new Slots(PARTS_AT_ONCE) }
  let lastId = 0
  const fates = followFates({
    entry: id => entries.value.find(one => one.id === id),
    look: sessionId => api<Footage>(`/api/sessions/${sessionId}`),
    tell: (id, broken) => change(id, { broken }),
  })

  const unfinished = computed(() => entries.value.filter(entry => !OVER.has(entry.state)))
  const active = computed(() => unfinished.value.filter(entry => !['paused', 'failed'].includes(entry.state)))
  const totals = computed(() => {
    const sizeBytes = entries.value.reduce((sum, entry) => sum + entry.sizeBytes, 0)
    const sentBytes = entries.value.reduce((sum, entry) => sum + (OVER.has(entry.state) ? entry.sizeBytes : entry.sentBytes), 0)
    const bytesPerSecond = active.value.reduce((sum, entry) => sum + (entry.bytesPerSecond ?? 0), 0)
    return { sizeBytes, sentBytes, bytesPerSecond, secondsLeft: bytesPerSecond ? Math.ceil((sizeBytes - sentBytes) / bytesPerSecond) : null }
  })

  /** Takes what was dropped or picked; answers the names of files that are neither clips nor captions. */
  function add(files: readonly File[], place: UploadPlace): string[] {
    const picked = sortPicked(files)
    for (const file of picked.clips) addClip(file, place)
    for (const file of picked.captions) void sendCaptions(file, place)
    return picked.others.map(file => file.name)
  }

  function addClip(file: File, place: UploadPlace): void {
    const same = unfinished.value.find(entry => entry.kind === 'clip' && entry.name === file.name && entry.sizeBytes === file.size && entry.sessionId === place.sessionId)
    // The same file again: a stopped upload goes on, with the file as it can be read now.
    if (same && active.value.includes(same)) return
    if (same) remove(same.id)
    const entry = newEntry(file, place, 'clip')
    const upload = new FileUpload(file, browserOutside(api, place.sessionId), slots, (progress) => {
      change(entry.id, progress)
      if (progress.state === 'done') fates.follow(entry.id)
    })
    running.set(entry.id, upload)
    interrupted.value = interrupted.value.filter(one => one.name !== file.name || one.sizeBytes !== file.size)
    void upload.run()
  }

  async function sendCaptions(file: File, place: UploadPlace): Promise<void> {
    const { id } = newEntry(file, place, 'captions')
    if (file.size > MOST_CAPTION_BYTES) return change(id, { state: 'failed', message: `${file.name} has more than 5 MB, which no clip’s captions need, so it was not sent. Check that it is a caption file.` })
    change(id, { state: 'sending' })
    try {
      const { trackId } = await api<{ trackId: string }>(`/api/sessions/${place.sessionId}/captions`, { method: 'POST', query: { name: file.name }, body: file, headers: { 'Content-Type': 'application/octet-stream' } })
      change(id, { state: 'done', sentBytes: file.size, trackId })
      fates.follow(id)
    }
    catch (error) {
      change(id, { state: 'failed', message: asProblem(error).message })
    }
  }

  function newEntry(file: File, place: UploadPlace, kind: UploadEntry['kind']): UploadEntry {
    const entry: UploadEntry = { id: ++lastId, name: file.name, sizeBytes: file.size, kind, ...place, trackId: null, broken: '', state: 'waiting', clipId: null, sentBytes: 0, bytesPerSecond: null, secondsLeft: null, message: '', double: null }
    entries.value.push(entry)
    remember()
    return entry
  }

  function change(id: number, progress: Partial<UploadEntry>): void {
    const entry = entries.value.find(one => one.id === id)
    if (!entry) return
    const before = entry.state
    Object.assign(entry, progress)
    if (entry.state !== before) remember()
  }

  function pause(id: number): void {
    running.get(id)?.pause()
  }
  function resume(id: number): void {
    void running.get(id)?.run()
  }

  /** Stops an upload and takes back what was sent. */
  async function cancel(id: number): Promise<void> {
    const entry = entries.value.find(one => one.id === id)
    running.get(id)?.pause()
    remove(id)
    if (entry?.clipId && !OVER.has(entry.state)) await api(`/api/clips/${entry.clipId}`, { method: 'DELETE' })
  }

  function remove(id: number): void {
    entries.value = entries.value.filter(entry => entry.id !== id)
    running.delete(id)
    remember()
  }

  function clearFinished(): void {
    for (const entry of entries.value.filter(one => OVER.has(one.state))) remove(entry.id)
  }

  function forgetInterrupted(): void {
    interrupted.value = []
    remember()
  }

  function remember(): void {
    if (!import.meta.client) return
    const own = unfinished.value.filter(entry => entry.kind === 'clip').map(({ name, sizeBytes, sessionId, buildId }) => ({ name, sizeBytes, sessionId, buildId }))
    writeInterrupted(localStorage, [...interrupted.value, ...own])
  }

  /** Called once a page: what was interrupted, and a warning before the page is left in the middle of an upload. */
  function watchPage(): void {
    interrupted.value = readInterrupted(localStorage)
    window.addEventListener('beforeunload', (event) => {
      if (active.value.length) event.preventDefault()
    })
  }

  return { entries, interrupted, unfinished, active, totals, add, pause, resume, cancel, remove, clearFinished, forgetInterrupted, watchPage }
})
