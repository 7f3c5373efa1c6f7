import { expect } from "@/tests/e2e/fixtures";
import { chooseScreen, connect, READ_MS, readCautions, settled, test, trial, WIRES, wireText } from "@/tests/e2e/bench-steps";
import { register } from "@/tests/e2e/pages-steps";

const ASKED_HEIGHT_PCT = 108;

/** A profile whose picture is too tall for its mode: a stop on a device that refuses pictures outside the raster. */
const tooTall = {
  format: "backporch-profile", version: 1, title: "Tall picture, 240 lines", summary: "A picture taller than its raster.",
  slots: [{ number: 1, name: "Cabinet A", placement: { widthPct: 96, heightPct: ASKED_HEIGHT_PCT, offsetPx: 12, offsetLines: -3 } }],
};

for (const wire of WIRES) {
  test(`apply a shared profile over ${wire}: what stops it is mended by a click, it is tried, and kept`, async ({ page, prepareWire, expectAccessible }) => {
    await prepareWire(page, wire);
    await register(page);
    await connect(page, wire);
    await chooseScreen(page, "Any 525-line television");
    const answer = await page.request.post("/api/profiles", { data: { document: tooTall, visibility: "private" }, headers: { origin: new URL(page.url()).origin } });
    expect(answer.status(), await answer.text()).toBe(201);
    const { id } = (await answer.json()) as { id: string };

    // The link outlives the page: the cable stays plugged in on the way through the library.
    await page.getByRole("link", { name: "Library" }).first().click();
    await page.getByRole("checkbox", { name: "Only mine" }).click();
    await page.getByRole("link", { name: "Tall picture, 240 lines" }).first().click();
    await page.getByRole("link", { name: /^Apply/u }).first().click();
    await page.waitForURL(`**/bench?apply=${id}**`);
    await expect(page.getByRole("heading", { name: "Tall picture, 240 lines" })).toBeVisible();
    const stop = page.locator("[data-severity=stop]").first();
    await expect(stop).toContainText("too tall");
    const go = page.getByRole("button", { name: "Back up and try" });
    await expect(go).toBeDisabled();
    await expectAccessible(page);

    await stop.getByRole("button", { name: /^Use \d/u }).first().click();
    await expect(page.locator("[data-severity=stop]")).toHaveCount(0);
    await readCautions(page);
    await expect(page.getByText("Ready.")).toBeVisible();
    await page.getByLabel("Length of the trial").selectOption("120");
    await go.click();
    await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
    await expect(page.getByRole("timer")).toHaveText(/^[0-2]:\d\d$/u);
    await expectAccessible(page);
    await page.getByRole("button", { name: "Slot 1", exact: true }).last().click();
    await expect(page.getByRole("button", { name: "Slot 1, seen" })).toBeVisible();
    await page.getByRole("button", { name: "Keep", exact: true }).click();
    await expect(trial(page, "kept")).toBeVisible({ timeout: READ_MS });
    await settled(page);
    await expect(page.getByText(/Backed up, \d+\s+values? changed since the one before/u)).toBeVisible();
    expect((await wireText(page, "MEM:COMMIT")).filter((line) => line.startsWith("MEM:COMMIT*"))).toHaveLength(1);
  });

  test(`do nothing over ${wire}: the old values come back by themselves`, async ({ page, prepareWire }) => {
    await prepareWire(page, wire);
    await register(page);
    await connect(page, wire);
    await chooseScreen(page, "Any 525-line television");
    await page.getByRole("slider", { name: /Horizontal position/u }).press("ArrowRight");
    // A setting that no profile has a word for goes the way of every other.
    await page.getByText("Everywhere", { exact: true }).click();
    await page.getByRole("slider", { name: /Fan speed/u }).press("ArrowRight");
    await page.getByRole("button", { name: "Review the plan" }).click();
    await expect(page.getByRole("row", { name: /Fan speed/u })).toContainText("45");
    await readCautions(page);
    await page.getByLabel("Length of the trial").selectOption("10");
    await page.getByRole("button", { name: "Back up and try" }).click();
    await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
    await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS + 10_000 });
    await settled(page);
    await expect(page.getByRole("slider", { name: /Fan speed/u })).toHaveAttribute("aria-valuenow", "40");
    await page.getByText("This slot", { exact: true }).click();
    await expect(page.getByRole("slider", { name: /Horizontal position/u })).toHaveAttribute("aria-valuenow", "0");
  });
}

test("a stop lets no byte of a write reach the device, and the server gives no run", async ({ page }) => {
  await register(page);
  await connect(page, "simulated");
  await chooseScreen(page, "Any 31 kHz monitor, one rate");
  await page.getByRole("slider", { name: /Horizontal position/u }).press("ArrowRight");
  await page.getByRole("button", { name: "Review the plan" }).click();
  await expect(page.locator("[data-severity=stop]").first()).toBeVisible();
  await expect(page.getByRole("button", { name: "Back up and try" })).toBeDisabled();
  expect((await wireText(page, "HPOS")).filter((line) => /HPOS -?\d/u.test(line))).toEqual([]);
  expect((await wireText(page, "SLOT")).every((line) => /\?|=/u.test(line))).toBe(true);
});
