import { onBeforeUnmount, onMounted, shallowRef, type Ref } from 'vue'
import { forgetWidths, TONES, type Theme, type Tone } from './drawing/pen'

/** Reads the page's colours and faces for drawing, again whenever the light or the fonts change. */
export function useStripTheme(text: Ref<HTMLElement | null>, figures: Ref<HTMLElement | null>) {
  const theme = shallowRef<Theme | null>(null)
  const endings: (() => void)[] = []

  function read() {
    if (!text.value) return
    const style = getComputedStyle(text.value)
    const triples = new Map(TONES.map(tone => [tone, style.getPropertyValue(`--${tone}`).trim().split(/[\s,]+/).join(', ')]))
    const made = new Map<string, string>()
    theme.value = {
      text: style.fontFamily || 'sans-serif',
      figures: (figures.value && getComputedStyle(figures.value).fontFamily) || style.fontFamily || 'sans-serif',
      tone(tone: Tone, alpha = 1) {
        const key = `${tone}${alpha}`
        let colour = made.get(key)
        if (colour === undefined) made.set(key, colour = `rgba(${triples.get(tone) || '0, 0, 0'}, ${alpha})`)
        return colour
      },
    }
  }

  onMounted(() => {
    read()
    const root = new MutationObserver(read)
    root.observe(document.documentElement, { attributes: true, attributeFilter: ['data-light', 'class', 'style'] })
    const scheme = matchMedia('(prefers-color-scheme: dark)')
    scheme.addEventListener('change', read)
    endings.push(() => root.disconnect(), () => scheme.removeEventListener('change', read))
    if (!theme.value) return
    const faces = [`400 13px ${theme.value.text}`, `600 13px ${theme.value.text}`, `550 13px ${theme.value.figures}`]
    void Promise.allSettled(faces.map(face => document.fonts?.load(face, 'Aa 0'))).then(() => {
      forgetWidths()
      read()
    })
  })
  onBeforeUnmount(() => endings.forEach(end => end()))
  return theme
}
