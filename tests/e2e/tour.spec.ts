import { expect, test } from "@/tests/e2e/fixtures";
import { chooseScreen, connect, moveBy, readCautions, READ_MS, trial } from "@/tests/e2e/bench-steps";
import { register, signInAs } from "@/tests/e2e/pages-steps";
import type { Page } from "@playwright/test";

/**
 * The README's tour, walked as its captions say. With TOUR=1 each stop is kept as a picture in `docs/tour/`;
 * otherwise the walk alone is the test, so that a caption which is no longer true fails.
 */
async function stop(page: Page, name: string): Promise<void> {
  await expect(page.getByText("Loading", { exact: true })).toHaveCount(0);
  await page.evaluate(() => scrollTo(0, 0));
  const path = process.env.TOUR === "1" ? `docs/tour/${name}.png` : undefined;
  await page.screenshot({ animations: "disabled", ...(path === undefined ? {} : { path }) });
}

test("the front page has a simulated device: slots, raster, picture", async ({ page }) => {
  await page.goto("/");
  await expect(page.getByRole("link", { name: "Try a simulated device" })).toBeVisible();
  await expect(page.getByText(/^Simulated: slot 1/u)).toBeVisible();
  await stop(page, "front");
});

test("the bench: settings on rulers, a plan under review, a trial", async ({ page }) => {
  await register(page);
  await connect(page, "simulated");
  await chooseScreen(page, "Any 525-line television");
  await expect(page.getByRole("slider", { name: /Horizontal position/u })).toBeVisible();
  await stop(page, "bench");
  await moveBy(page, "Horizontal position", 4);
  await page.getByRole("button", { name: "Review the plan" }).click();
  await expect(page.getByRole("button", { name: "Back up and try" })).toBeVisible();
  await stop(page, "plan");
  await readCautions(page);
  await page.getByRole("button", { name: "Back up and try" }).click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await stop(page, "trial");
});

test("the demo's backups, library and screens have something to show", async ({ page }) => {
  await signInAs(page, "imke", "/backups");
  await expect(page.getByRole("table").first()).toBeVisible();
  await expect(page.getByText("known good").first()).toBeVisible();
  await stop(page, "backups");
  await page.goto("/library");
  await expect(page.getByRole("table").getByRole("link").nth(7), "a dozen profiles").toBeVisible();
  await stop(page, "library");
  await page.goto("/screens");
  await expect(page.getByRole("main").getByRole("link").first()).toBeVisible();
  await stop(page, "screens");
});

test("rasters that fit, those that are printed, and a resistor", async ({ page }) => {
  await page.goto("/modes");
  await expect(page.getByRole("heading", { name: /fit\.$/u })).toBeVisible();
  await stop(page, "modes");
  await page.goto("/standards");
  await expect(page.getByRole("table").getByRole("row").nth(7)).toBeVisible();
  await stop(page, "standards");
  await page.goto("/attenuator?source=5&impedance=33&screen=bt470-525");
  await expect(page.getByText(/in line with the sync\.$/u)).toBeVisible();
  await stop(page, "attenuator");
});

test("drivers, and how one was proved", async ({ page }) => {
  await page.goto("/drivers");
  await expect(page.getByRole("table", { name: "Drivers by device model" }).getByRole("link", { name: "Lanternfield LF-8" })).toBeVisible();
  await stop(page, "drivers");
  await page.goto("/drivers/lanternfield-lf8?part=conformance");
  await expect(page.getByRole("table", { name: "Sections of the report" })).toBeVisible();
  await stop(page, "conformance");
});
