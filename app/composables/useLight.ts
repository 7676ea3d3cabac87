/** Light or dim, as the reader chose it, else as their system asks. Kept in a cookie so that the first paint is right. */
export function useLight() {
  const chosen = useCookie<'bright' | 'dim' | null>('light', { maxAge: 31_536_000, sameSite: 'lax', default: () => null })
  const system = useState('light-system', () => false)
  const dim = computed(() => chosen.value ? chosen.value === 'dim' : system.value)
  function toggle() {
    chosen.value = dim.value ? 'bright' : 'dim'
  }
  return { chosen, system, dim, toggle }
}
