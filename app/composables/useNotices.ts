export interface Notice {
  id: number
  kind: 'note' | 'good' | 'bad'
  text: string
  action?: { label: string, run: () => unknown }
}

let last = 0

/** Short messages at the foot of the page; those with an action (undo) stay longer, bad ones until dismissed. */
export function useNotices() {
  const notices = useState<Notice[]>('notices', () => [])

  function dismiss(id: number) {
    notices.value = notices.value.filter(one => one.id !== id)
  }
  function notice(entry: Omit<Notice, 'id'>) {
    const id = ++last
    notices.value = [...notices.value.slice(-3), { ...entry, id }]
    if (import.meta.client && entry.kind !== 'bad') setTimeout(dismiss, entry.action ? 12_000 : 6_000, id)
    return id
  }
  return { notices, notice, dismiss }
}
