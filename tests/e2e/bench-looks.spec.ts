import { expect } from "@/tests/e2e/fixtures";
import { chooseScreen, connect, moveBy, READ_MS, readCautions, settled, test, trial } from "@/tests/e2e/bench-steps";
import { expectWhole, PHONE } from "@/tests/e2e/pages-steps";

test("the bench is whole by day, by night and at 360 px, from the first look to the trial and back", async ({ page, expectAccessible }) => {
  await page.goto("/bench");
  await expect(page.getByRole("button", { name: "Use a simulated device" })).toBeVisible();
  await expectWhole(page, expectAccessible);
  await connect(page, "simulated");
  await chooseScreen(page, "Any 525-line television");
  await expectWhole(page, expectAccessible);
  // A name on tape can be read whole, at any width.
  await page.setViewportSize(PHONE);
  const cut = await page.locator("[data-tape-name]").evaluateAll((names) => names.filter((name) => name.scrollWidth > name.clientWidth + 1).map((name) => name.textContent));
  expect(cut, "names cut short").toEqual([]);
  await moveBy(page, "Horizontal position", 2);
  await page.getByRole("button", { name: "Review the plan" }).click();
  await readCautions(page);
  await expectWhole(page, expectAccessible);
  await page.getByLabel("Length of the trial").selectOption("120");
  await page.getByRole("button", { name: "Back up and try" }).click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await expectWhole(page, expectAccessible);
  await page.getByRole("button", { name: "Put back", exact: true }).click();
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS });
  await settled(page);
});
