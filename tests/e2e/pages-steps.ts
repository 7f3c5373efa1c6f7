import type { Page } from "@playwright/test";
import { demoAccount } from "@/db/demo/accounts";
import type { DemoPerson } from "@/db/demo/accounts";
import { expect } from "@/tests/e2e/fixtures";

export type Theme = "day" | "night";
export const THEMES: readonly Theme[] = ["day", "night"];

/** The narrowest phone that the pages are made for. */
export const PHONE = { width: 360, height: 760 } as const;

/** Signs a person of the demo in through the page, and lands where the address said. */
export async function signInAs(page: Page, person: DemoPerson, returnPath: string): Promise<void> {
  const { email, password } = demoAccount(person);
  await page.goto(`/sign-in?from=${encodeURIComponent(returnPath)}`);
  await page.getByLabel("E-mail address").fill(email);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Sign in", exact: true }).click();
  await page.waitForURL(`**${returnPath}`);
}

/** Makes the system prefer a theme, as people's systems do. */
export async function preferTheme(page: Page, theme: Theme): Promise<void> {
  await page.emulateMedia({ colorScheme: theme === "night" ? "dark" : "light" });
}

/** Nothing is wider than the screen, so nothing scrolls sideways but what is made to. */
export async function expectNoSidewaysScroll(page: Page): Promise<void> {
  expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0);
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
