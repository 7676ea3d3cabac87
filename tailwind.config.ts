import type { Config } from 'tailwindcss'
import plugin from 'tailwindcss/plugin'

const tone = (name: string) => `rgb(var(--${name}) / <alpha-value>)`

/** Colours and type are named for what they mean on a lofting floor; app/assets/main.css holds their values, light and dark. */
export default {
  content: ['./app/**/*.{vue,ts}'],
  darkMode: ['selector', '[data-light="dim"]'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      floor: tone('floor'),
      sheet: tone('sheet'),
      well: tone('well'),
      ink: { DEFAULT: tone('ink'), soft: tone('ink-soft'), faint: tone('ink-faint') },
      rule: { DEFAULT: tone('rule'), strong: tone('rule-strong') },
      lead: { DEFAULT: tone('lead'), wash: tone('lead-wash'), on: tone('lead-on') },
      bottle: { DEFAULT: tone('bottle'), wash: tone('bottle-wash'), on: tone('bottle-on') },
      brass: { DEFAULT: tone('brass'), wash: tone('brass-wash'), on: tone('brass-on') },
    },
    fontFamily: {
      text: ['"Familjen Grotesk Variable"', 'system-ui', 'sans-serif'],
      figures: ['"Sofia Sans Semi Condensed Variable"', '"Familjen Grotesk Variable"', 'sans-serif'],
    },
    extend: {
      borderRadius: { DEFAULT: '2px', plank: '1px 5px 1px 5px' },
      minHeight: { touch: '2.75rem' },
      minWidth: { touch: '2.75rem' },
      maxWidth: { sheet: '92rem', prose: '44rem' },
    },
  },
  // A variant, not a screen: a screen that is no width would switch all `max-…:` variants off.
  plugins: [plugin(({ addVariant }) => addVariant('coarse', '@media (pointer: coarse)'))],
} satisfies Config
