import type { Config } from 'tailwindcss'

/** Colours are CSS variables set in assets/theme.css, so that one class serves the day and the night theme. */
const token = (name: string) => `rgb(var(--${name}) / <alpha-value>)`

export default {
  darkMode: ['selector', '[data-theme="night"]'],
  content: ['./components/**/*.{vue,ts}', './pages/**/*.vue', './layouts/**/*.vue', './app.vue', './error.vue'],
  theme: {
    extend: {
      colors: {
        paper: token('paper'),
        sheet: token('sheet'),
        ink: token('ink'),
        hairline: token('hairline'),
        brass: token('brass'),
        'brass-ink': token('brass-ink'),
        vermilion: token('vermilion'),
        'vermilion-ink': token('vermilion-ink'),
        sea: token('sea'),
        slate: token('slate'),
      },
      fontFamily: { sans: ['Manrope', 'system-ui', 'sans-serif'] },
    },
  },
} satisfies Config
