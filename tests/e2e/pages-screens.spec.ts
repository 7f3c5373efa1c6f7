import { readFileSync } from "node:fs";
import type { Page } from "@playwright/test";
import { expect, test } from "@/tests/e2e/fixtures";
import { expectWhole, register, signInAs } from "@/tests/e2e/pages-steps";

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
  // The form has its values once the page has woken up.
  await expect(page.getByLabel("Line rate from")).toHaveValue("15.577");
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

test("an owner's screens and the form are whole by day, by night and at 360 px", async ({ page, expectAccessible }) => {
  await signInAs(page, "imke", "/screens");
  await expect(page.getByText("Before it: Cabinet A, upright", { exact: true })).toBeVisible();
  await expect(page.getByRole("article")).toBeVisible();
  await expect(page.getByText("Demo: the Saltmarsh Play Archive")).toBeVisible();
  await expectWhole(page, expectAccessible);
  await page.goto("/screens/new");
  await expect(page.getByRole("button", { name: "Add screen" })).toBeVisible();
  await expectWhole(page, expectAccessible);
});

/** A published EDID: an analogue CRT, 30 to 83 kHz at 48 to 120 Hz and 170 MHz (`edid-decode`, in edid-ranges.json). */
const crt = () => Uint8Array.from(readFileSync("tests/fixtures/standards/edid/edid013.bin"));

/** Drops a file on the page, as a file manager does. */
async function dropFile(page: Page, name: string, bytes: Uint8Array): Promise<void> {
  const dataTransfer = await page.evaluateHandle(
    ([fileName, values]) => {
      const transfer = new DataTransfer();
      transfer.items.add(new File([Uint8Array.from(values)], fileName));
      return transfer;
    },
    [name, [...bytes]] as const,
  );
  // A page that has not woken up yet hears no event: the file hangs over it until it says so.
  await expect(async () => {
    await page.dispatchEvent("main", "dragover", { dataTransfer });
    await expect(page.getByText("Let go to read it.")).toBeVisible({ timeout: 1000 });
  }).toPass();
  await page.dispatchEvent("main", "drop", { dataTransfer });
}

test("an EDID dropped on Screens becomes a screen with its limits and their source", async ({
  page,
  expectAccessible,
}) => {
  await register(page, "/screens");
  await expect(page.getByText("From an EDID file")).toBeVisible();
  await dropFile(page, "crt.bin", crt());
  const reading = page.getByRole("region", { name: "What the EDID says" });
  await expect(reading).toContainText("32 × 24 cm");
  await expect(reading).toContainText("Rates and pixel clock are those of its range limits.");
  await expectAccessible(page);
  await page.getByRole("button", { name: "Add screen" }).click();
  await page.waitForURL(/show=/u);
  const detail = page.getByRole("article", { name: "AplVision750" });
  await expect(detail.getByRole("row", { name: /Bands.*30 … 83\s+kHz at 48 … 120\s+Hz/u })).toContainText("EDID");
  await expect(detail.getByRole("row", { name: /Pixel clock at most.*170\.000/u })).toContainText("EDID");
  await expect(detail.getByRole("row", { name: /Sync level/u })).toContainText("not known, so not checked");
  await expect(detail.getByText(/Limits from the EDID 1\.1 of AplVision750/u)).toBeVisible();
  await expect(detail.getByRole("listitem").filter({ hasText: "240p60" }).first()).toContainText(
    "this screen begins at",
  );
});

test("an EDID fills in the form and loses nothing that was typed; a file that is none changes nothing", async ({
  page,
}) => {
  await register(page, "/screens/new?from=bt470-525");
  // The form has its values once the page has woken up.
  await expect(page.getByLabel("Line rate from")).toHaveValue("15.577");
  await page.getByLabel("Name").fill("Gallery 2, left");
  const sync = page.getByRole("textbox", { name: "From", exact: true });
  await sync.fill("0.25");
  const bad = crt();
  bad[40] = (bad[40] ?? 0) ^ 1;
  await dropFile(page, "cut.bin", bad);
  await expect(page.getByText("cut.bin was not taken.")).toBeVisible();
  await expect(page.getByText(/checksum of its first block is wrong/u)).toBeVisible();
  await expect(page.getByLabel("Line rate from")).toHaveValue("15.577");

  await page
    .getByLabel("From an EDID file")
    .setInputFiles({ name: "crt.bin", mimeType: "application/octet-stream", buffer: Buffer.from(crt()) });
  await expect(page.getByText("cut.bin was not taken.")).toHaveCount(0);
  await expect(page.getByLabel("Line rate from")).toHaveValue("30");
  await expect(page.getByLabel("Bands, where it comes from")).toHaveValue("edid");
  await expect(page.getByLabel("Name")).toHaveValue("Gallery 2, left");
  await expect(sync).toHaveValue("0.25");
  await page.getByRole("button", { name: "Undo" }).click();
  await expect(page.getByLabel("Line rate from")).toHaveValue("15.577");
});

test("an EDID without range limits says that its rates come from its timings, without an account", async ({ page }) => {
  const bytes = crt();
  // The range limits stand at 90 (edid-ranges.json); 10h is an unused descriptor. The last byte makes the sum 0.
  bytes[93] = 0x10;
  bytes[127] = -bytes.subarray(0, 127).reduce((sum, byte) => sum + byte, 0) & 0xff;
  await page.goto("/screens");
  await expect(page.getByText("From an EDID file")).toBeVisible();
  await dropFile(page, "no-ranges.bin", bytes);
  await expect(page.getByText(/Caution: It has no range limits: the rates are those of its timings/u)).toBeVisible();
  await expect(page.getByRole("link", { name: "Sign in to keep it" })).toBeVisible();
});

test("the modes of the devices before a screen stand among the known ones", async ({ page }) => {
  await signInAs(page, "imke", "/screens");
  await page.getByRole("link", { name: /^Cabinet A, upright/u }).click();
  const detail = page.getByRole("article", { name: "Cabinet A, upright" });
  await expect(detail.getByRole("heading", { name: /^In the slots of Cabinet A, upright/u })).toContainText(
    /\d of \d fit/u,
  );
  await expect(detail.getByText("on its devices")).toBeVisible();
});

test("a screen to be, from an EDID, is whole by day, by night and at 360 px", async ({ page, expectAccessible }) => {
  await page.goto(`/screens?edid=${Buffer.from(crt()).toString("base64url")}`);
  await expect(page.getByRole("article", { name: "AplVision750" })).toBeVisible();
  await expectWhole(page, expectAccessible);
});
