import { useEventListener } from '@vueuse/core'
import { type SessionAction, sessionActionOf } from '~/utils/sessionKeys'

/** What takes a key for itself: fields always, buttons and links only what presses them. */
const FIELD = 'input:not([type=checkbox]):not([type=range]), textarea, select, [contenteditable=true]'
const PRESSED = 'button, a[href], summary, [role=option], [role=tab], input[type=checkbox]'

/** Binds the page's keys. None fires while somebody types, or while a dialog is open. */
export function useSessionKeys(act: Record<SessionAction, (event: KeyboardEvent) => void>, enabled: () => boolean) {
  const letters = useLetterKeys()
  useEventListener('keydown', (event: KeyboardEvent) => {
    if (event.defaultPrevented || event.isComposing || !enabled()) return
    const target = event.target as HTMLElement
    if (target.closest?.(FIELD) || document.querySelector('[role=dialog]')) return
    if ((event.key === ' ' || event.key === 'Enter') && target.closest?.(PRESSED)) return
    if (!letters.on && event.key.length === 1 && event.key !== ' ' && !event.ctrlKey && !event.metaKey) return
    const action = sessionActionOf(event)
    if (!action) return
    event.preventDefault()
    act[action](event)
  })
}
