import { expect, test } from "@/tests/e2e/fixtures";
import { register } from "@/tests/e2e/bench-steps";
import { expectNoSidewaysScroll, PHONE, preferTheme, signInAs, THEMES } from "@/tests/e2e/pages-steps";

test("everybody sees what a standard envelope takes, and where each limit comes from", async ({ page }) => {
  await page.goto("/screens");
  await page.getByRole("link", { name: /^625-line television/u }).click();
  const detail = page.getByRole("article", { name: "625-line television" });
  await expect(detail.getByRole("row", { name: /Bands.*15\.469 … 15\.781\s+kHz/u })).toContainText("standard");
  await expect(detail.getByRole("row", { name: /Pixel clock at most/u })).toContainText("not known, so not checked");
  await expect(detail.getByRole("listitem").filter({ hasText: "576i50" })).toContainText("fits");
  await expect(detail.getByRole("listitem").filter({ hasText: "480p60" }).first()).toContainText("this screen ends at");
  await expect(page.getByText("Inside a CRT cabinet voltages stay lethal after switch-off.")).toBeVisible();
});

test("a screen is made from an envelope, changed, and deleted", async ({ page, expectAccessible }) => {
  await register(page, "/screens/new?from=bt470-525");
  await page.getByLabel("Name").fill("Workshop, 4:3");
  await page.getByLabel("Line rate from").fill("15,6");
  await page.getByLabel("Bands, where it comes from").selectOption("service-literature");
  await expectAccessible(page);
  await page.getByRole("button", { name: "Add screen" }).click();
  const detail = page.getByRole("article", { name: "Workshop, 4:3" });
  await expect(detail.getByRole("row", { name: /Bands.*15\.6 … 15\.892/u })).toContainText("service literature");

  await detail.getByRole("link", { name: "Edit" }).click();
  await page.getByLabel("Line rate from").fill("17");
  await page.getByRole("button", { name: "Save screen" }).click();
  await expect(page.getByText("The lower end is above the upper one.")).toBeVisible();
  await page.getByLabel("Line rate from").fill("15.5");
  await page.getByRole("button", { name: "Save screen" }).click();
  await expect(detail.getByRole("row", { name: /Bands.*15\.5 … 15\.892/u })).toBeVisible();

  await detail.getByRole("button", { name: "Delete" }).click();
  await page.getByRole("alertdialog").getByRole("button", { name: "Delete" }).click();
  await expect(page.getByRole("link", { name: /Workshop, 4:3/u })).toHaveCount(0);
});

for (const theme of THEMES) {
  test(`an owner's screens and the form by ${theme}: no axe violation`, async ({ page, expectAccessible }) => {
    await preferTheme(page, theme);
    await signInAs(page, "imke", "/screens");
    await expect(page.getByText("Before it: Cabinet A, upright", { exact: true })).toBeVisible();
    await expect(page.getByRole("article")).toBeVisible();
    await expect(page.getByText("Demo: the Saltmarsh Play Archive")).toBeVisible();
    await expectAccessible(page);
    await page.goto("/screens/new");
    await expect(page.getByRole("button", { name: "Add screen" })).toBeVisible();
    await expectAccessible(page);
  });
}

test("the form of a screen is whole on a phone of 360 px", async ({ page, expectAccessible }) => {
  await page.setViewportSize(PHONE);
  await register(page, "/screens/new");
  await expect(page.getByRole("button", { name: "Add screen" })).toBeVisible();
  await expectNoSidewaysScroll(page);
  await expectAccessible(page);
});
