export type Theme = 'light' | 'dark'

/** What the person chose over their device's own light or dark; null follows the device. Kept in a cookie, so the server draws it right the first time. */
export function useTheme() {
  const theme = useCookie<Theme | null>('theme', { maxAge: 60 * 60 * 24 * 365, sameSite: 'lax', default: () => null })
  useHead({ htmlAttrs: { 'data-theme': () => theme.value === 'light' || theme.value === 'dark' ? theme.value : undefined } })
  return { theme }
}
