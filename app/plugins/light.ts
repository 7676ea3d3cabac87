/** Puts the light on <html>. Without a choice a two-line script decides before the first paint. */
export default defineNuxtPlugin(() => {
  const { chosen, system, dim } = useLight()
  useHead({ htmlAttrs: { 'data-light': () => chosen.value ?? (import.meta.client ? (dim.value ? 'dim' : 'bright') : undefined) } })
  if (import.meta.server && !chosen.value) {
    useHead({ script: [{ innerHTML: 'document.documentElement.dataset.light=matchMedia("(prefers-color-scheme: dark)").matches?"dim":"bright"', tagPosition: 'head' }] })
  }
  if (import.meta.client) {
    const query = matchMedia('(prefers-color-scheme: dark)')
    system.value = query.matches
    query.addEventListener('change', event => system.value = event.matches)
  }
})
