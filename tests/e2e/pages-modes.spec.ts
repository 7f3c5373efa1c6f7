import { expect, test } from "@/tests/e2e/fixtures";
import { expectWhole, register, signInAs } from "@/tests/e2e/pages-steps";

const NONE_FITS = "/modes?lines=270&rate=60&width=1440&keep=rate&device=lanternfield-lf8";

test("a mode that fits, and one that fits nowhere, are whole by day, by night and at 360 px", async ({
  page,
  expectAccessible,
}) => {
  await page.goto("/modes?device=lanternfield-lf8");
  await expect(page.getByRole("heading", { name: "240 lines at 60 Hz fit." })).toBeVisible();
  await expectWhole(page, expectAccessible);
  await page.goto(NONE_FITS);
  await expect(page.getByRole("heading", { name: /don’t fit this screen/u })).toBeVisible();
  await expectWhole(page, expectAccessible);
  await page.getByRole("button", { name: "Paste a modeline" }).click();
  await expect(page.getByRole("dialog")).toBeVisible();
  await expectAccessible(page);
});

test("a link with bad values falls back, and says so", async ({ page }) => {
  await page.goto("/modes?lines=many&device=none-such&screen=6f0f3a52-6f4e-4d0e-9f3b-0c6c1a4b7a11");
  await expect(page.getByText("“lines” of the link can't be read")).toBeVisible();
  await expect(page.getByText("“device” of the link can't be read")).toBeVisible();
  await expect(page.getByText("The screen of the link is not among yours")).toBeVisible();
  await expect(page.getByLabel("for this screen")).toHaveValue("bt470-525");
  await expect(page.getByRole("textbox", { name: "Lines, lines" })).toHaveValue("240");
});

test("a raster outside the screen is not tried, and what stops it is said", async ({ page }) => {
  // CTA-861 code 2: 480 lines at 59.94 Hz, 31.469 kHz.
  await page.goto("/modes?lines=480&rate=59.94&width=720&raster=27_720.16.62.60_480.9.6.30_pnn&made=hand");
  await expect(page.locator("[data-rule='screen.line-rate'][data-severity=stop]")).toContainText("31.469");
  await expect(page.getByRole("button", { name: "Try on the bench" })).toBeDisabled();
  await page.getByRole("button", { name: "Back to what fits best" }).click();
  await expect(page.getByRole("link", { name: "Try on the bench" })).toBeVisible();
});

test("an owner's own screens lead the list, and a mode goes into a new profile, then into its next revision", async ({
  page,
}) => {
  await register(page, "/modes");
  await page.getByRole("button", { name: "Use in a profile" }).click();
  const dialog = page.getByRole("dialog");
  await dialog.getByLabel("Title").fill("Modes for the workshop");
  await dialog.getByRole("button", { name: "Make the profile" }).click();
  await expect(page.getByRole("heading", { name: "Modes for the workshop" })).toBeVisible();
  await expect(page.getByText("240p60").first()).toBeVisible();

  await page.goto("/modes?lines=244");
  await page.getByRole("button", { name: "Use in a profile" }).click();
  await dialog.getByLabel("Profile", { exact: true }).selectOption({ label: "Modes for the workshop" });
  await dialog.getByLabel("Where it goes").selectOption({ label: "Instead of 240p60" });
  await dialog.getByRole("button", { name: "Publish the revision" }).click();
  await expect(page.getByRole("link", { name: "Replaces the mode 240p60 by 244p60" })).toBeVisible();
});

test("the demo owner makes a mode for the wide CRT of her gallery", async ({ page }) => {
  await signInAs(page, "imke", "/modes");
  await page.getByLabel("for this screen").selectOption({ label: "Cabinet A, upright" });
  await expect(page.getByText("bands from service literature")).toBeVisible();
  await expect.poll(() => page.url()).toContain("limits=");
});
