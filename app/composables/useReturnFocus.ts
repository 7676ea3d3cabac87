/**
 * When what was open in its place closes, the focus goes back to what opened it: the element with
 * `data-opens` and the same id.
 */
export function useReturnFocus(open: Ref<string | null>) {
  watch(open, (now, before) => {
    if (before && !now) document.querySelector<HTMLElement>(`[data-opens="${before}"]`)?.focus()
  }, { flush: 'post' })
}
