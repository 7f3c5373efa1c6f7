export type Theme = "day" | "night";

/** Holds the reader's choice; without it the system decides. */
export const THEME_COOKIE = "theme";

const YEAR_S = 365 * 24 * 60 * 60;

/** What a cookie says; undefined for anything but the two themes. */
export function readTheme(value: string | undefined): Theme | undefined {
  return value === "day" || value === "night" ? value : undefined;
}

/** The cookie that keeps a choice for a year. */
export function themeCookie(theme: Theme): string {
  return `${THEME_COOKIE}=${theme}; Path=/; Max-Age=${YEAR_S}; SameSite=Lax`;
}

/** The theme that is in force: the choice, or what the system prefers. */
export function themeInForce(chosen: string | undefined, systemIsDark: boolean): Theme {
  return readTheme(chosen) ?? (systemIsDark ? "night" : "day");
}
