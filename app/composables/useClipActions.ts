import type { ClipView } from '#shared/types/session'

/** Changing and removing one clip, with what went wrong said at the foot of the page. */
export function useClipActions(clip: () => ClipView, changed: () => void) {
  const api = useApi()
  const uploads = useUploads()
  const { confirm } = useConfirm()
  const { notice } = useNotices()
  const holdings = useHoldings()
  const busy = ref(false)

  async function change(path: string, method: 'POST' | 'PATCH' | 'DELETE', body?: unknown): Promise<void> {
    busy.value = true
    try {
      await api(path, { method, body })
      changed()
    }
    catch (error) {
      notice({ kind: 'bad', text: asProblem(error).message })
    }
    finally {
      busy.value = false
    }
  }

  async function remove(captionFiles: number): Promise<void> {
    const { id, name, state } = clip()
    const upload = uploads.entries.find(entry => entry.clipId === id)
    const held = state === 'uploading' ? '' : await holdings('clips', id).catch(() => null)
    // What cannot be counted now could not be deleted either.
    if (held === null) return void notice({ kind: 'bad', text: 'What hangs on this clip could not be counted, so nothing was deleted. Check the connection and try again.' })
    const also = [held, captionFiles ? captionFiles === 1 ? 'its caption file' : `its ${captionFiles} caption files` : ''].filter(Boolean).join(', and ')
    const asked = state === 'uploading'
      ? { title: `Cancel ${name}?`, message: 'What was sent so far is removed from the site. The file on your device is not touched.', action: 'Cancel upload' }
      : { title: `Delete ${name}?`, message: `The footage is removed from the site${also ? `, with ${also}` : '; nothing else hangs on it'}. This cannot be undone; keep your own copy of the file.`, action: 'Delete clip' }
    if (!await confirm(asked)) return
    if (upload) uploads.pause(upload.id)
    await change(`/api/clips/${id}`, 'DELETE')
    if (upload) uploads.remove(upload.id)
  }

  return { busy, change, remove }
}
