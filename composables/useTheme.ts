export type Theme = 'day' | 'night'

const aYear = 365 * 24 * 3600

/**
 * The day or the night theme. The choice lies in a cookie, so that the server draws the page in it from the first byte; without a choice the
 * page follows the system by style sheet alone (assets/theme.css).
 */
export function useTheme() {
  const chosen = useCookie<Theme | null>('theme', { maxAge: aYear, sameSite: 'lax', path: '/' })
  const system = useState<Theme>('system-theme', () => 'day')
  const theme = computed<Theme>(() => chosen.value === 'day' || chosen.value === 'night' ? chosen.value : system.value)

  onMounted(() => {
    const query = window.matchMedia('(prefers-color-scheme: dark)')
    const follow = () => { system.value = query.matches ? 'night' : 'day' }
    follow()
    query.addEventListener('change', follow)
    onScopeDispose(() => query.removeEventListener('change', follow))
  })

  function toggle() {
    chosen.value = theme.value === 'night' ? 'day' : 'night'
  }

  return { theme, chosen, toggle }
}
