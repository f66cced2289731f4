export const THEMES = ['auto', 'light', 'dark'] as const
export type Theme = typeof THEMES[number]

/** Light, dark or as the device says; kept in a cookie, so that the first picture from the server is right. */
export function useTheme() {
  const cookie = useCookie<string | null>('standmark-theme', { maxAge: 31_536_000, sameSite: 'lax', path: '/' })
  const theme = computed<Theme>({
    get: () => THEMES.find(name => name === cookie.value) ?? 'auto',
    set: (name) => { cookie.value = name === 'auto' ? null : name },
  })
  return { theme }
}
