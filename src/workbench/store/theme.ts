/** What the user picked; `system` follows the device. */
export const THEME_CHOICES = ['system', 'light', 'dark'] as const
export type ThemeChoice = (typeof THEME_CHOICES)[number]

/** What is drawn. */
export type Theme = 'light' | 'dark'

export function resolveTheme(choice: ThemeChoice, systemIsDark: boolean): Theme {
  if (choice === 'system') return systemIsDark ? 'dark' : 'light'
  return choice
}
