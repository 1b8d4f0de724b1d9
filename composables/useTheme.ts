export type Theme = 'system' | 'light' | 'dark'

/** Paper by daylight, by lamp, or as the device says. Kept in a cookie, so that the first paint is already right. */
export function useTheme() {
  const cookie = useCookie<Theme>('polewright-theme', { default: () => 'system', maxAge: 31_536_000, sameSite: 'lax' })
  const theme = computed<Theme>(() => cookie.value === 'light' || cookie.value === 'dark' ? cookie.value : 'system')
  const setTheme = (next: Theme) => { cookie.value = next }

  return { theme, setTheme }
}
