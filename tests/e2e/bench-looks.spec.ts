import { expect } from "@/tests/e2e/fixtures";
import { chooseScreen, connect, moveBy, READ_MS, readCautions, settled, test, trial } from "@/tests/e2e/bench-steps";
import { expectNoSidewaysScroll, PHONE, preferTheme, THEMES } from "@/tests/e2e/pages-steps";

const WIDE = { width: 1440, height: 900 } as const;
const VIEWS = [...THEMES.map((theme) => ({ theme, size: WIDE })), { theme: "night", size: PHONE }] as const;

for (const { theme, size } of VIEWS) {
  test(`the bench at ${size.width} px by ${theme}: whole from the first look to the trial and back`, async ({ page, expectAccessible }) => {
    await page.setViewportSize(size);
    await preferTheme(page, theme);
    const look = async () => {
      await expectNoSidewaysScroll(page);
      await expectAccessible(page);
    };
    await page.goto("/bench");
    await expect(page.getByRole("button", { name: "Use a simulated device" })).toBeVisible();
    await look();
    await connect(page, "simulated");
    await chooseScreen(page, "Any 525-line television");
    await look();
    // A name on tape can be read whole, at any width.
    const cut = await page.locator("[data-tape-name]").evaluateAll((names) => names.filter((name) => name.scrollWidth > name.clientWidth + 1).map((name) => name.textContent));
    expect(cut, "names cut short").toEqual([]);
    await moveBy(page, "Horizontal position", 2);
    await page.getByRole("button", { name: "Review the plan" }).click();
    await readCautions(page);
    await look();
    await page.getByLabel("Length of the trial").selectOption("120");
    await page.getByRole("button", { name: "Back up and try" }).click();
    await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
    await look();
    await page.getByRole("button", { name: "Put back", exact: true }).click();
    await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS });
    await settled(page);
    await look();
  });
}
