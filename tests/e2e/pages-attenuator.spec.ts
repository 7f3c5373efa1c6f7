import { expect, test } from "@/tests/e2e/fixtures";
import { expectWhole } from "@/tests/e2e/pages-steps";

// 5 V behind 33 Ω, 620 Ω in line, 75 Ω of load: 0.51511 V. Source: ngspice, in tests/fixtures/standards/attenuation.json.

test("a level and its impedance give the resistor, as they are typed", async ({ page }) => {
  await page.goto("/attenuator");
  await expect(
    page.getByText("Still needed: the level with nothing connected, the impedance of the source."),
  ).toBeVisible();
  await page.getByLabel("Level, open").fill("5");
  await page.getByLabel("Its impedance").fill("33");
  await page.getByLabel("Wanted level").fill("0.515");
  await expect(page.getByText("620\u00A0Ω in line with the sync.")).toBeVisible();
  await expect(page.getByRole("row", { name: /^620/u })).toContainText("0.515");
  await expect(
    page.getByRole("img", { name: /A source of 5.V with 33.Ω of its own, a series resistor of 620.Ω/u }),
  ).toBeVisible();
  // The address follows a while after the last key.
  await page.waitForURL(({ searchParams }) => ["5", "33", "0.515"].every((typed) => [...searchParams.values()].includes(typed)));
  await page.reload();
  await expect(page.getByText("620\u00A0Ω in line with the sync.")).toBeVisible();

  await page.getByLabel("Level, open").fill("0.5");
  await expect(page.getByText("Too weak: only an amplifier helps.")).toBeVisible();
  await page.getByLabel("Level, open").fill("five");
  await expect(page.getByText("This is no figure.")).toBeVisible();
  await expect(page.getByText("Measure first.")).toBeVisible();
});

test("two readings tell the source, once it is said what they were terminated with", async ({ page }) => {
  await page.goto("/attenuator?way=readings");
  await expect(page.getByText("First say what the readings were terminated with.")).toBeVisible();
  const [first, second] = [
    page.getByRole("group", { name: "First reading" }),
    page.getByRole("group", { name: "Second reading" }),
  ];
  await first.getByLabel("Resistor").fill("0");
  // 5 V × 75 Ω / (33 + 0 + 75) Ω, and with 75 Ω more: Ohm's law.
  await first.getByLabel("Level").fill("3.4722");
  await second.getByLabel("Resistor").fill("75");
  await second.getByLabel("Level").fill("2.0492");
  await page.getByRole("radio", { name: "Nothing" }).click();
  await expect(page.getByText(/A reading over an open input says nothing of the source/u)).toBeVisible();
  await page.getByRole("radio", { name: "75 Ω" }).click();
  await expect(page.getByText("its impedance33\u00A0Ω")).toBeVisible();
  await expect(page.getByText("1\u2009100\u00A0Ω in line with the sync.")).toBeVisible();
});

test("a screen's level leads here, and what it takes is said of each value", async ({ page }) => {
  await page.goto("/screens?show=bt470-525");
  await page.getByRole("link", { name: "Work out a resistor for it" }).click();
  await expect(page.getByText("It takes 0.2 … 0.6\u00A0V peak to peak.")).toBeVisible();
  await page.getByLabel("Level, open").fill("5");
  await page.getByLabel("Its impedance").fill("33");
  await expect(page.getByRole("row", { name: /^820/u })).toContainText("inside");
});

const answered = "/attenuator?source=5&impedance=33&screen=bt470-525";

test("Attenuator is whole by day, by night and on a phone of 360 px", async ({ page, expectAccessible }) => {
  await page.goto(answered);
  await expect(page.getByRole("heading", { level: 1, name: "Attenuator" })).toBeVisible();
  await expect(page.getByText("Nearest E24 values")).toBeVisible();
  await expectWhole(page, expectAccessible);
  await page.goto("/attenuator?way=readings&terminated=none");
  await expect(page.getByText("What were both readings terminated with?")).toBeVisible();
  await expectWhole(page, expectAccessible);
});
