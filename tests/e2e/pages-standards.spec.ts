import { expect, test } from "@/tests/e2e/fixtures";
import { expectNoSidewaysScroll, expectWhole } from "@/tests/e2e/pages-steps";

// Figures of CTA-861 codes 6, 8 and 23 below: `edid-decode --vic`, in tests/fixtures/standards/vic.json.

test("a raster is found by its lines, and held against a screen", async ({ page }) => {
  await page.goto("/screens?show=bt470-525");
  await page.getByRole("link", { name: "All standards on it" }).click();
  await expect(page.getByRole("heading", { level: 1, name: "Standards" })).toBeVisible();
  await page.getByRole("textbox", { name: "Lines" }).fill("240");
  await page.getByLabel("Document", { exact: true }).selectOption("CTA-861");
  await page.getByRole("searchbox", { name: "Search" }).fill("1440 px");
  const table = page.getByRole("table", { name: "Published rasters" });
  const code8 = table.getByRole("row", { name: /CTA-861, code 8 .* 262 /u });
  await expect(code8).toContainText("15.734");
  await expect(code8).toContainText("60.05");
  await expect(code8).toContainText("1\u2009716");
  await expect(code8).toContainText("4.59");
  await expect(code8).toContainText("fits");
  await expect(table.getByRole("row", { name: /2880 px/u })).toHaveCount(0);

  await page.getByLabel("Hold against").selectOption("Any 625-line television");
  await expect(code8).toContainText("field rate above");
  await page.getByLabel("Only what fits").click();
  await expect(page.getByRole("heading", { name: "Nothing matches" })).toBeVisible();
  await page.getByRole("button", { name: "Show all rasters" }).click();
  await expect(table.getByRole("row", { name: /VESA DMT, 0x04/u })).toBeVisible();
});

test("the address holds what was searched for and the order", async ({ page }) => {
  await page.goto("/standards?screen=");
  await page.getByRole("textbox", { name: "Rate" }).fill("50");
  await page.getByRole("button", { name: "Sync, µs" }).click();
  await page.waitForURL(/rate=50&order=-sync/u);
  const first = page.getByRole("table", { name: "Published rasters" }).getByRole("row").nth(1);
  const text = await first.innerText();
  await page.reload();
  await expect(page.getByRole("textbox", { name: "Rate" })).toHaveValue("50");
  await expect(page.getByRole("columnheader", { name: "Sync, µs" })).toHaveAttribute("aria-sort", "descending");
  expect(await first.innerText()).toBe(text);
});

test("two rasters are compared, and what differs is marked", async ({ page }) => {
  await page.goto("/standards?lines=240&document=cta&screen=bt470-525");
  await page.getByRole("checkbox", { name: "Compare 240p60, 1440 px; 262 lines in all; CTA-861, code 8" }).click();
  await expect(page.getByRole("button", { name: "Compare" })).toBeDisabled();
  await page.getByRole("checkbox", { name: /^Compare 480i60, 1440 px; CTA-861, code 6$/u }).click();
  await page.getByRole("button", { name: "Compare" }).click();
  await expect(page.getByRole("heading", { level: 1, name: "Compare two standards" })).toBeVisible();
  await expect(page.getByText("2 of 16 figures differ")).toBeVisible();
  await expect(page.getByRole("row", { name: /^Field rate\s*, differs/u })).toContainText("59.940");
  await expect(page.getByRole("row", { name: /^Line sync 124/u })).toContainText("4.59");
  await expect(page.getByRole("img", { name: /^One field.*240p60.*480i60/u })).toBeVisible();
  await page.getByRole("radio", { name: "Over each other" }).click();
  await page.waitForURL(/laid=over/u);

  // Code 23 has 312, 313 or 314 lines: 27 MHz / 1728 / 313 is 49.92 Hz.
  await page.getByLabel("Right, dashed").selectOption("288p50, 1440 px; 313 lines in all; CTA-861, code 23");
  await expect(page.getByRole("row", { name: /^Field rate\s*, differs/u })).toContainText("49.920");
  await expect(page.getByText(/does not fit 525-line television: field rate 49\.92/u)).toBeVisible();
  await page.goBack();
  await expect(page.getByRole("heading", { level: 1, name: "Standards" })).toBeVisible();
});

test("a modeline is copied as X.Org reads it", async ({ page, context }) => {
  await context.grantPermissions(["clipboard-read", "clipboard-write"]);
  await page.goto("/standards?q=code+8&lines=240&screen=");
  await page
    .getByRole("button", { name: "Copy modeline of 240p60, 1440 px; 262 lines in all; CTA-861, code 8" })
    .click();
  await expect(page.getByText("Copied: modeline of 240p60, 1440 px.", { exact: true })).toBeVisible();
  expect(await page.evaluate(() => navigator.clipboard.readText())).toBe(
    'Modeline "240p60" 27.00 1440 1478 1602 1716 240 244 247 262 -HSync -VSync',
  );
});

const comparison = "/standards?pick=cta-861-8,cta-861-23&compare=true&screen=bt470-525";

test("Standards and the comparison are whole by day, by night and on a phone of 360 px", async ({
  page,
  expectAccessible,
}) => {
  await page.goto("/standards?lines=240&screen=bt470-525&pick=cta-861-8");
  await expect(page.getByRole("table", { name: "Published rasters" })).toBeVisible();
  await expectWhole(page, expectAccessible);
  await page.goto(comparison);
  await expect(page.getByRole("heading", { level: 1, name: "Compare two standards" })).toBeVisible();
  await expectWhole(page, expectAccessible);
});

test("the list of Standards leaves columns out rather than scroll sideways", async ({ page }) => {
  await page.goto("/standards?screen=bt470-525");
  await expect(page.getByRole("table", { name: "Published rasters" })).toBeVisible();
  for (const widthPx of [780, 1060, 1280]) {
    await page.setViewportSize({ width: widthPx, height: 800 });
    await expect(page.getByRole("columnheader", { name: "Clock, MHz" })).toHaveCount(0);
    await expectNoSidewaysScroll(page);
  }
});
