import { expect } from "@/tests/e2e/fixtures";
import { connect, moveBy, READ_MS, settled, test, tryIt, trial, WIRES, chooseScreen } from "@/tests/e2e/bench-steps";
import { register } from "@/tests/e2e/pages-steps";

for (const wire of WIRES) {
  test(`back up over ${wire}: everything is read with progress, dated, named; the second backup says what changed`, async ({ page, expectAccessible, prepareWire }) => {
    await prepareWire(page, wire);
    await register(page);
    await connect(page, wire);
    await page.getByRole("button", { name: "Back up", exact: true }).click();
    await expect(page.getByRole("progressbar", { name: "Settings read" })).toBeVisible();
    await expect(page.getByText(/\d\ss left/u)).toBeVisible();
    await settled(page);
    await expect(page.getByText("Backed up, the first of this device.")).toBeVisible();
    await page.getByRole("button", { name: "Rename" }).click();
    await page.getByLabel("Name of this device").fill("Workshop rack");
    await page.getByRole("button", { name: "Save" }).click();
    await expect(page.getByText("Known as Workshop rack.")).toBeVisible();

    await chooseScreen(page, "Any 525-line television");
    await moveBy(page, "Horizontal position", 3);
    await tryIt(page);
    await page.getByRole("button", { name: "Keep", exact: true }).click();
    await expect(trial(page, "kept")).toBeVisible({ timeout: READ_MS });
    await settled(page);
    await expect(page.getByText(/Backed up, 1\s+value changed since the one before/u)).toBeVisible({ timeout: READ_MS });

    await page.getByRole("link", { name: "See the backups" }).click();
    await expect(page.getByText("Workshop rack").first()).toBeVisible();
    await expectAccessible(page);
  });
}
