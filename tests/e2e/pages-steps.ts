import type { Page } from "@playwright/test";
import { demoAccount } from "@/db/demo/accounts";
import type { DemoPerson } from "@/db/demo/accounts";
import { expect } from "@/tests/e2e/fixtures";

export type Theme = "day" | "night";
export const THEMES: readonly Theme[] = ["day", "night"];

/** The narrowest phone that the pages are made for. */
export const PHONE = { width: 360, height: 760 } as const;

/**
 * Posts as a page of the site would; the answer's cookies are the page's.
 *
 * Signing in through the form is tested once, with the account's pages; everywhere else it would only cost time.
 */
async function post(page: Page, path: string, data: object): Promise<void> {
  const { origin } = new URL((await page.request.get("/api/health")).url());
  const answer = await page.request.post(path, { data, headers: { origin } });
  expect(answer.ok(), await answer.text()).toBe(true);
}

/** Signs a person of the demo in, and opens a page. */
export async function signInAs(page: Page, person: DemoPerson, path: string): Promise<void> {
  const { email, password } = demoAccount(person);
  await post(page, "/api/sessions", { email, password });
  await page.goto(path);
}

let people = 0;

/** Registers somebody new, so that no test meets another's devices, and opens a page. */
export async function register(page: Page, path = "/bench"): Promise<void> {
  people += 1;
  const email = `tove.${Date.now()}.${process.pid}.${people}@example.org`;
  const password = "a long plain password";
  await post(page, "/api/account", { name: "Tove Halvard", email, password });
  await post(page, "/api/sessions", { email, password });
  await page.goto(path);
}

/** Makes the system prefer a theme, as people's systems do. */
export async function preferTheme(page: Page, theme: Theme): Promise<void> {
  await page.emulateMedia({ colorScheme: theme === "night" ? "dark" : "light" });
}

/** Nothing is wider than the screen, so nothing scrolls sideways but what is made to. */
export async function expectNoSidewaysScroll(page: Page): Promise<void> {
  // A page that was made narrower lays itself out anew, a frame or two later.
  await expect.poll(() => page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0);
}

const WIDE = { width: 1440, height: 900 } as const;

/**
 * The page as it stands is whole by day, by night and at 360 px: nothing that axe finds, nothing that scrolls sideways.
 *
 * One visit for the three: a page follows the system's theme and its window while it is open.
 */
export async function expectWhole(page: Page, expectAccessible: (page: Page) => Promise<void>): Promise<void> {
  for (const { theme, size } of [{ theme: "day", size: WIDE }, { theme: "night", size: WIDE }, { theme: "night", size: PHONE }] as const) {
    await page.setViewportSize(size);
    await preferTheme(page, theme);
    await expectNoSidewaysScroll(page);
    await expectAccessible(page);
  }
  await page.setViewportSize(WIDE);
}
