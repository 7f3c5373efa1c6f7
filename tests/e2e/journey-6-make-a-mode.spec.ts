import type { Page } from "@playwright/test";
import { expect, test } from "@/tests/e2e/fixtures";
import { connect, READ_MS, readCautions, settled, trial, wireText } from "@/tests/e2e/bench-steps";
import { parseModeline } from "@/lib/timing/modeline/parse-modeline";
import type { RasterTiming } from "@/lib/timing/raster";

/** A page may copy and paste, as it may with a person before it. */
test.use({ permissions: ["clipboard-read", "clipboard-write"] });

const figure = (page: Page, name: string) => page.getByRole("textbox", { name, exact: true });
const foot = (page: Page) => page.getByRole("region", { name: "What to do next" });
const none = (page: Page) => page.getByRole("heading", { name: /don’t fit/u });

async function copiedModeline(page: Page): Promise<RasterTiming> {
  await foot(page).getByRole("button", { name: "Copy modeline" }).click();
  await expect(page.getByText("Copied: modeline.").first()).toBeVisible();
  const read = parseModeline(await page.evaluate(() => navigator.clipboard.readText()));
  if (!read.ok) throw new Error(read.error.message);
  return read.value.timing;
}

/** The raster as the LF-8 tells it of its output: clock in kHz, parts across, parts down. */
function asTold({ pixelClockHz, horizontal, vertical }: RasterTiming): string {
  const parts = [horizontal, vertical].map(({ active, frontPorch, sync, backPorch }) =>
    [active, frontPorch, sync, backPorch, "NEG"].join(","),
  );
  return `OUT:RASTER=${pixelClockHz / 1000},${parts.join(",")},P`;
}

test("from nothing to a raster that runs on the simulated device, without an account", async ({ page }) => {
  await page.goto("/modes");
  await page.getByLabel("on this device").selectOption({ label: "Lanternfield LF-8" });
  await figure(page, "Lines, lines").fill("244");
  await expect(page.getByRole("heading", { name: "244 lines at 60 Hz fit." })).toBeVisible();
  await expect(foot(page)).toContainText("inside every limit of this screen that is known");
  const made = await copiedModeline(page);
  expect(made.vertical.active).toBe(244);

  await foot(page).getByRole("link", { name: "Try on the bench" }).click();
  await expect(page.getByText("Connect a device to try 244p60 on it.")).toBeVisible();
  await page.getByRole("button", { name: "Use a simulated device" }).click();
  await expect(page.getByRole("heading", { name: "244p60 in slot 1" })).toBeVisible({ timeout: READ_MS });
  await expect(page.locator("[data-severity=stop]")).toHaveCount(0);
  await readCautions(page);
  await page.getByRole("button", { name: "Back up and try" }).click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  // What the device itself answers when it is asked what goes out.
  const told = await wireText(page, "OUT:RASTER=");
  expect(told.at(-1)).toContain(asTold(made));
  await page.getByRole("button", { name: "Keep", exact: true }).click();
  await expect(trial(page, "kept")).toBeVisible({ timeout: READ_MS });
});

test("a device that is connected already gets the mode at once, in the slot that is active", async ({ page }) => {
  await page.goto("/bench");
  await connect(page, "simulated");
  await page.getByRole("link", { name: "Modes", exact: true }).first().click();
  await foot(page).getByRole("link", { name: "Try on the bench" }).click();
  await expect(page.getByRole("heading", { name: "240p60 in slot 1" })).toBeVisible({ timeout: READ_MS });
  await page.getByRole("button", { name: "Back to the bench" }).click();
  await settled(page);
});

test("what fits nowhere says why with its figures, and the nearest that does fit is taken", async ({ page }) => {
  await page.goto("/modes?device=lanternfield-lf8");
  await page.getByRole("checkbox", { name: "keep the refresh" }).click();
  await figure(page, "Lines, lines").fill("270");
  await expect(none(page)).toHaveText(/270 lines at 60 Hz don’t fit this screen/u);
  // 290 lines at 60 Hz are 17.4 kHz; the preset's band for 525-line televisions ends 1 % above 15.734 kHz.
  await expect(page.locator("[data-none-fits]")).toContainText(
    /290 in all with 20 of blanking; at 60\sHz that is 17\.4\skHz and this screen ends at 15\.892\skHz/u,
  );
  await expect(page.getByRole("img", { name: /wanted \(17\.400\skHz, 60\.00\sHz\) does not fit/u })).toBeVisible();
  const nearest = page
    .getByRole("table", { name: "The nearest rasters that fit" })
    .getByRole("button", { name: /lines/u });
  await nearest.nth(1).click();
  await expect(nearest.nth(1)).toHaveAttribute("aria-pressed", "true");
  await expect(foot(page).getByRole("link", { name: "Try on the bench" })).toBeVisible();
});

test("a modeline is pasted, with its errors named, fills the page, and is copied back as it was", async ({ page }) => {
  const line = 'Modeline "workshop" 27.00 1440 1478 1602 1716 240 244 247 263 -HSync -VSync';
  await page.goto("/modes");
  await page.getByRole("button", { name: "Paste a modeline" }).click();
  const dialog = page.getByRole("dialog");
  await dialog.getByLabel("Modeline").fill(line.replace("1602", "16o2"));
  await expect(dialog.getByText("The hsyncend is no whole number. It reads “16o2”.")).toBeVisible();
  await expect(dialog.getByRole("button", { name: "Use this raster" })).toBeDisabled();
  await dialog.getByLabel("Modeline").fill(line);
  await dialog.getByRole("button", { name: "Use this raster" }).click();
  await expect(figure(page, "Lines, lines")).toHaveValue("240");
  await expect(figure(page, "Back porch down, lines")).toHaveValue("16");
  const read = parseModeline(line);
  expect(await copiedModeline(page)).toEqual(read.ok ? read.value.timing : null);
});

test("handles and locks: a porch is moved by key, what else changed is said, and what is kept holds", async ({
  page,
}) => {
  await page.goto("/modes?device=lanternfield-lf8&clock=27&raster=27_1440.38.124.114_240.4.3.15_pnn");
  const handle = page.getByRole("slider", { name: "Front porch", exact: true });
  await expect(handle).toHaveAttribute("aria-valuenow", "38");
  await handle.press("Shift+ArrowRight");
  await expect(handle).toHaveAttribute("aria-valuenow", "48");
  await expect(page.getByText(/Changed with it:.*the back porch 114 → 104/u)).toBeVisible();
  await page.getByRole("button", { name: "Take it back" }).click();
  await expect(handle).toHaveAttribute("aria-valuenow", "38");

  await page.getByRole("checkbox", { name: "keep the front porch", exact: true }).click();
  await page.getByRole("checkbox", { name: "keep the back porch", exact: true }).click();
  await page.getByRole("checkbox", { name: "keep the clocks of a line" }).click();
  await figure(page, "Sync, clocks").fill("130");
  await expect(page.getByRole("alert").filter({ hasText: "which you keep" })).toContainText("the clocks of a line");
  await expect(handle).toHaveAttribute("aria-valuenow", "38");
  await page.getByRole("button", { name: /^Let the clocks of a line/u }).click();
  await expect(page.getByRole("slider", { name: "Sync", exact: true })).toHaveAttribute("aria-valuenow", "130");
});

test("a link holds the whole page", async ({ page, context }) => {
  await page.goto("/modes");
  await page.getByLabel("on this device").selectOption({ label: "Brackenrow 4R" });
  await page.getByLabel("from this source").selectOption({ label: "1280 × 720, 50.00 Hz" });
  await page.getByLabel("for this screen").selectOption({ label: "525- and 625-line television" });
  await figure(page, "Refresh, Hz").fill("50");
  await figure(page, "Lines, lines").fill("288");
  await page.getByRole("checkbox", { name: "keep the refresh" }).click();
  await page.getByRole("slider", { name: "Front porch down" }).press("ArrowRight");
  const verdict = await foot(page).innerText();
  await page.getByRole("button", { name: "Copy link" }).click();
  const link = await page.evaluate(() => navigator.clipboard.readText());
  // The address follows when the hand rests.
  await expect.poll(() => page.url()).toBe(link);

  const other = await context.newPage();
  await other.goto(link);
  await expect(figure(other, "Lines, lines")).toHaveValue("288");
  await expect(figure(other, "Refresh, Hz")).toHaveValue("50.00");
  await expect(other.getByRole("checkbox", { name: "keep the refresh" })).toBeChecked();
  await expect(other.getByLabel("from this source")).toHaveValue("1280x720p50");
  await expect(other.getByLabel("on this device")).toHaveValue("brackenrow-4r");
  await expect(other.getByText("This raster is made by hand")).toBeVisible();
  await expect.poll(() => foot(other).innerText()).toBe(verdict);
});
