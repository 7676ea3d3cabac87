import type { ShallowRef } from 'vue'

/** `/` to the box, arrows along the moments, Enter plays (it is a link's own key), Space stops and goes on, Escape closes. */
export function useResultKeys({ box, results, player }: {
  box: Readonly<ShallowRef<{ focus: () => void } | null>>
  results: Readonly<ShallowRef<HTMLElement | null>>
  player: ReturnType<typeof useMomentPlayer>
}) {
  useEventListener('keydown', (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey || event.defaultPrevented) return
    const target = event.target as HTMLElement
    const typing = target.matches('input:not([type=search]), select, textarea, video, [contenteditable]')
    const inBox = target.matches('input[type=search]')
    const links = [...results.value?.querySelectorAll<HTMLElement>('[data-moment]') ?? []]
    if (event.key === '/' && !typing && !inBox) {
      event.preventDefault()
      box.value?.focus()
    }
    else if (event.key === 'Escape' && !typing && !inBox) player.close()
    else if (event.key === ' ' && player.current.value && !typing && !inBox && !target.matches('button, summary')) {
      event.preventDefault()
      player.toggle()
    }
    else if ((event.key === 'ArrowDown' || event.key === 'ArrowUp') && !typing && links.length) {
      const at = links.indexOf(document.activeElement as HTMLElement)
      const to = event.key === 'ArrowDown' ? at + 1 : at - 1
      event.preventDefault()
      if (to < 0) box.value?.focus()
      else links[Math.min(to, links.length - 1)]?.focus()
    }
  })
}
