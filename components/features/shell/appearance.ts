/** How a person wants the pages to look; kept in two cookies so that the server renders it at once, without a flash. */
export const THEME_COOKIE = "twinpass-theme";
export const DAYLIGHT_COOKIE = "twinpass-daylight";
export const THEMES = ["system", "light", "dark"] as const;
export type Theme = (typeof THEMES)[number];

/** True for a value that the theme cookie may hold. */
export function isTheme(value: unknown): value is Theme {
  return THEMES.some((theme) => theme === value);
}
