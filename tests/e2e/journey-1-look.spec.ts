import { expect, test } from "@/tests/e2e/fixtures";
import { READ_MS, settled, trial } from "@/tests/e2e/bench-steps";

test("look before buying a cable: slots and picture of a simulated device, without an account", async ({ page, expectAccessible }) => {
  await page.goto("/");
  await page.getByRole("link", { name: "Try a simulated device" }).click();
  await expect(page.getByRole("heading", { name: "Slots" })).toBeVisible({ timeout: READ_MS });
  await settled(page);
  await expect(page.getByText("Device, simulated")).toBeVisible();
  await expect(page.getByRole("button", { name: /^Slot \d/u })).toHaveCount(8);
  await expect(page.getByRole("img", { name: /^Simulated: slot 1/u })).toBeVisible();
  await expect(page.getByText("Leave the screen unplugged.")).toBeVisible();
  await page.getByLabel("Screen", { exact: true }).selectOption({ label: "Any 525-line television" });
  await expect(page.getByText("in range")).toBeVisible();
  await expect(page.getByText("Leave the screen unplugged.")).toHaveCount(0);
  await expect(page.locator("[data-locked=true]")).toHaveText("The screen locks.");
  await expectAccessible(page);
});

test("without an account a backup and a trial stay in the page, and doing nothing puts the old values back", async ({ page }) => {
  await page.goto("/bench?simulated=lanternfield-lf8");
  await settled(page);
  await page.getByLabel("Screen", { exact: true }).selectOption({ label: "Any 525-line television" });
  await page.getByRole("slider", { name: /Horizontal position/u }).press("ArrowRight");
  await page.getByRole("button", { name: "Review the plan" }).click();
  await page.getByLabel("Length of the trial").selectOption("10");
  for (const box of await page.getByRole("checkbox", { name: "I have read this" }).all()) await box.click();
  await page.getByRole("button", { name: "Back up and try" }).click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS + 10_000 });
  await settled(page);
  await expect(page.getByRole("textbox", { name: /Horizontal position/u })).toHaveValue(/^0/u);
});
