import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { expect, test } from "@/tests/e2e/fixtures";
import { expectWhole, signInAs } from "@/tests/e2e/pages-steps";

const SENTENCE = /A simulated device is made from this very driver/u;

test("everybody sees the drivers, what each says, and how it was proved", async ({ page, expectAccessible }) => {
  await page.goto("/drivers");
  await expect(page.getByRole("table", { name: "Drivers by device model" }).getByRole("link", { name: "Lanternfield LF-8" })).toBeVisible();
  await expect(page.getByText(SENTENCE).first()).toBeVisible();
  await expectWhole(page, expectAccessible);

  await page.getByRole("link", { name: "Lanternfield LF-8" }).click();
  await expect(page.getByRole("heading", { name: "Version 1.0.0, published" })).toBeVisible();
  await expect(page.getByText(/115\s200\sbaud, 8 data bits, no parity/u)).toBeVisible();
  await expect(page.getByRole("button", { name: /Run conformance|Publish|Withdraw|New draft/u })).toHaveCount(0);
  await expectWhole(page, expectAccessible);

  await page.getByRole("tab", { name: "Conformance" }).click();
  await expect(page.getByText(SENTENCE)).toBeVisible();
  await expect(page.getByRole("table", { name: "Sections of the report" })).toBeVisible();
  await expectWhole(page, expectAccessible);

  const file = page.waitForEvent("download");
  await page.getByRole("link", { name: "Export .driver.json" }).click();
  expect((await file).suggestedFilename()).toBe("lanternfield-lf8-1.0.0.driver.json");
});

test("a maintainer sees the red draft of the demo, by failure and by difference", async ({ page, expectAccessible }) => {
  await signInAs(page, "maren", "/drivers/lanternfield-lf8?version=1.1.0&part=conformance");
  await expect(page.getByRole("heading", { name: "Version 1.1.0, draft" })).toBeVisible();
  await expect(page.getByText("What failed")).toBeVisible();
  await expect(page.getByText(SENTENCE)).toBeVisible();
  await expectWhole(page, expectAccessible);
  await page.getByRole("tab", { name: "Differences" }).click();
  await expect(page.getByText("settings[slots[*].placement.offsetPx].wire.read.request")).toBeVisible();
  await expectWhole(page, expectAccessible);
});

test("the editor names a mistake by its path, leads to the line, and shows the bytes of what compiled", async ({ page, expectAccessible }) => {
  await signInAs(page, "maren", "/drivers/lanternfield-lf8/versions/1.1.0");
  const text = page.getByRole("textbox", { name: "Definition" });
  await expect(page.getByRole("region", { name: "Problems" })).toBeVisible();
  await text.fill(JSON.stringify({ ...lanternfieldLf8, version: "1.1.0", transport: { ...lanternfieldLf8.transport, baudRate: 12 } }, null, 2));
  const problems = page.getByRole("region", { name: "Problems" });
  await expect(problems.getByText("transport.baudRate")).toBeVisible();
  await problems.getByRole("button", { name: /^line \d+$/u }).click();
  await expect(text).toBeFocused();
  expect(await text.evaluate((area) => (area instanceof HTMLTextAreaElement ? area.value.slice(area.selectionStart, area.selectionEnd) : ""))).toContain('"baudRate": 12');
  await page.getByRole("tab", { name: "Fields" }).click();
  await expect(page.getByText("300 to 4 000 000.").first()).toBeVisible();
  await expectWhole(page, expectAccessible);
});

test("recordings: one's own in a list, exchange by exchange, and replayed against a version", async ({ page, expectAccessible }) => {
  await signInAs(page, "imke", "/recordings");
  await expect(page.getByRole("table", { name: "Recordings" })).toBeVisible();
  await expectWhole(page, expectAccessible);
  await page.getByRole("link", { name: "Cabinet A, everything read, two slots (simulated)" }).click();
  await expect(page.getByText(/The driver says the same in all of/u)).toBeVisible();
  await expectWhole(page, expectAccessible);
});

test("an owner's bad file is told by line, a good one is stored, asked about, and answered", async ({ page, expectAccessible }) => {
  await signInAs(page, "tobin", "/recordings");
  // The list stands there once the page listens.
  await expect(page.getByRole("heading", { name: "No recording yet" }).or(page.getByRole("table", { name: "Recordings" }))).toBeVisible();
  const input = page.getByLabel("Recording file");
  const head = '{"format":"backporch-recording","version":1,"driver":{"slug":"lanternfield-lf8","version":"1.0.0"},"startedAt":"2026-11-20T18:00:00.000Z","struckOut":false}';
  const file = (name: string, lines: readonly string[]) => ({ name, mimeType: "application/jsonl", buffer: Buffer.from([head, ...lines].join("\n")) });
  await input.setInputFiles(file("bad.jsonl", ['{"atMs":0,"direction":"out","hex":"2A"}', '{"atMs":1}']));
  await expect(page.getByText("bad.jsonl is no recording that can be read.")).toBeVisible();
  await expect(page.getByText("line 3")).toBeVisible();
  // What the device is asked for who it is, by IEEE 488.2: *IDN? and a line end.
  await input.setInputFiles(file("evening.jsonl", ['{"atMs":0,"direction":"out","hex":"2A 49 44 4E 3F 0A"}']));
  const name = `Evening ${Date.now()}`;
  await page.getByLabel("Name", { exact: true }).fill(name);
  await page.getByRole("button", { name: "Upload" }).click();
  await expect(page.getByRole("heading", { name })).toBeVisible();

  await page.goto("/drivers/lanternfield-lf8?part=questions");
  await page.getByLabel("Question", { exact: true }).fill(`Does it answer without a check? ${name}`);
  await page.getByLabel("Recording", { exact: true }).selectOption({ label: name });
  await page.getByRole("button", { name: "Ask", exact: true }).click();
  await expect(page.getByText(`Does it answer without a check? ${name}`)).toBeVisible();
  await expectWhole(page, expectAccessible);

  await signInAs(page, "maren", "/drivers/lanternfield-lf8?part=questions");
  const question = page.getByRole("listitem").filter({ hasText: name });
  await question.getByLabel("Answer").fill("Yes: three queries do.");
  await question.getByRole("button", { name: "Answer" }).click();
  await expect(question.getByText("Yes: three queries do.")).toBeVisible();
  await page.goto("/recordings");
  await expect(page.getByRole("link", { name })).toBeVisible();
});

test("a maintainer listens to a recording that plays the device", async ({ page, expectAccessible }) => {
  await signInAs(page, "maren", "/recordings/listen");
  await expect(page.getByText("No line is open")).toBeVisible();
  await page.getByRole("radio", { name: "No driver" }).click();
  await expectWhole(page, expectAccessible);
  await page.getByRole("radio", { name: "A recording as the device" }).click();
  await page.getByLabel("Model").selectOption({ label: "Lanternfield LF-8" });
  await page.getByLabel("Recording", { exact: true }).selectOption({ label: "Cabinet A, everything read, two slots (simulated)" });
  await page.getByRole("button", { name: "Replay" }).click();
  await expect(page.getByText(/\d+ values were read\. The recording went along with the driver/u)).toBeVisible({ timeout: 60_000 });
  await page.getByRole("button", { name: "Stop" }).click();
  await expect(page.getByRole("heading", { name: "Keep what was heard" })).toBeVisible();
  await expectWhole(page, expectAccessible);
});
