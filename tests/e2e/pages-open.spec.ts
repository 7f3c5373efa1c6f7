import { expect, test } from "@/tests/e2e/fixtures";
import { expectWhole, PHONE, preferTheme } from "@/tests/e2e/pages-steps";

/** Pages that everybody can read, each with what shows that it is there. */
const pages = [
  { path: "/", shows: "A console for video scalers with a serial port" },
  { path: "/sign-in", shows: "Sign in" },
  { path: "/register", shows: "Register" },
  { path: "/library", shows: "Library" },
  { path: "/screens", shows: "Screens" },
] as const;

for (const { path, shows } of pages) {
  test(`${path} is whole by day, by night and on a phone of 360 px`, async ({ page, expectAccessible }) => {
    await page.goto(path);
    await expect(page.getByRole("heading", { level: 1, name: shows })).toBeVisible();
    await expect(page.getByText("Loading")).toHaveCount(0);
    await expectWhole(page, expectAccessible);
  });
}

test("the switch outweighs the system's theme, and stays after a reload", async ({ page }) => {
  await preferTheme(page, "day");
  await page.goto("/");
  const ground = () => page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor);
  const day = await ground();
  await page.getByRole("button", { name: "Day theme, change to night" }).click();
  await expect(page.getByRole("button", { name: "Night theme, change to day" })).toBeVisible();
  const night = await ground();
  expect(night).not.toBe(day);
  await page.reload();
  await expect(page.locator("html")).toHaveAttribute("data-theme", "night");
  expect(await ground()).toBe(night);
});

test("the front page shows a slot in lock, and another out of the screen's range", async ({ page }) => {
  await page.goto("/");
  await expect(page.getByRole("img", { name: /240p60, in lock/u })).toBeVisible();
  await page.getByRole("button", { name: /Monitor 480/u }).click();
  await expect(page.getByRole("img", { name: /480p60, out of this screen/u })).toBeVisible();
  await expect(page.getByRole("link", { name: "Try a simulated device" })).toHaveAttribute(
    "href",
    "/bench?simulated=lanternfield-lf8",
  );
});

test("on a phone the pages are in a menu that the keyboard opens", async ({ page }) => {
  await page.setViewportSize(PHONE);
  await page.goto("/screens");
  await page.getByRole("button", { name: "Menu" }).press("Enter");
  await expect(page.getByRole("menuitem", { name: "Library" })).toBeVisible();
  await page.getByRole("menuitem", { name: "Library" }).click();
  await expect(page.getByRole("heading", { level: 1, name: "Library" })).toBeVisible();
});

test("a page that is not there says so and leads on", async ({ page, expectAccessible }) => {
  const response = await page.goto("/nowhere");
  expect(response?.status()).toBe(404);
  await expect(page.getByRole("heading", { name: "There is no such page" })).toBeVisible();
  await expectAccessible(page);
});
