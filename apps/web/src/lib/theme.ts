export const themes = ['light', 'dark', 'sunlight'] as const;
export type Theme = (typeof themes)[number];

/** The theme a cookie names; null: as the device has it. */
export function readTheme(cookie: string | undefined): Theme | null {
  return themes.find((theme) => theme === cookie) ?? null;
}
