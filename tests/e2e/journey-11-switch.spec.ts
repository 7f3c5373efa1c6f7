import { expect } from "@/tests/e2e/fixtures";
import { chooseScreen, connect, settled, test, WIRES, wireText } from "@/tests/e2e/bench-steps";
import { register } from "@/tests/e2e/pages-steps";

for (const wire of WIRES) {
  test(`switch over ${wire}: a slot is checked against the screen, recalled once, read back`, async ({ page, prepareWire }) => {
    await prepareWire(page, wire);
    await register(page);
    await connect(page, wire);
    await chooseScreen(page, "Any 525-line television");
    await page.getByRole("button", { name: "Recall slot 2" }).click();
    // The sync level is a caution on this screen: it is read first, then the same act is confirmed.
    const asked = page.getByRole("dialog", { name: "Recall slot 2" });
    await expect(asked).toContainText("Composite sync");
    await asked.getByRole("button", { name: "Recall slot 2" }).click();
    await expect(page.getByText("Slot 2 is on: recalled once and read back.")).toBeVisible();
    await settled(page);
    await expect(page.getByText("480 lines, interlaced")).toBeVisible();
    await expect(page.locator("[data-locked=true]")).toBeVisible();
    expect((await wireText(page, "*RCL")).filter((line) => line.startsWith("*RCL 2"))).toHaveLength(1);
  });

  test(`switch over ${wire}: a slot that the screen cannot take never leaves the page`, async ({ page, expectAccessible, prepareWire }) => {
    await prepareWire(page, wire);
    await register(page);
    await connect(page, wire);
    await chooseScreen(page, "Any 525-line television");
    await page.getByRole("button", { name: "Recall slot 5" }).click();
    const held = page.getByRole("dialog", { name: "Recall slot 5" });
    await expect(held).toContainText("outside what the screen takes");
    await expect(held.locator("[data-severity=stop]").first()).toBeVisible();
    await expect(held.getByRole("button", { name: "Recall slot 5" })).toHaveCount(0);
    await expectAccessible(page);
    await held.getByRole("button", { name: "Stay on this slot" }).click();
    expect((await wireText(page, "*RCL")).filter((line) => line.startsWith("*RCL 5"))).toHaveLength(0);
  });
}
