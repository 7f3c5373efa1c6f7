import { connect, READ_MS, settled, test } from "@/tests/e2e/bench-steps";
import { expect } from "@/tests/e2e/fixtures";
import { register, signInAs } from "@/tests/e2e/pages-steps";
import { smallDrivers } from "@/tests/unit/serial/small-drivers";

/** What was wrong, and what it should be: the words of one command, and a mode too many. */
const RIGHT_WORD = "SLOT{slot:int}:HPOS";
const WRONG_WORD = "SLOT{slot:int}:HOFFS";

test("a maintainer changes a driver, proves it, publishes it; an owner of the model is told and moves", async ({ page, browser, baseURL }) => {
  test.slow();
  const model = `L9-${Date.now() % 1_000_000}`;
  const slug = `lanternfield-${model.toLowerCase()}`;
  const [small] = smallDrivers;
  const first = { ...small, model, slug };

  await test.step("a driver comes as a file, is proved and published", async () => {
    await signInAs(page, "maren", "/drivers");
    // What came from the server stands there once the page listens.
    await expect(page.getByRole("link", { name: "Lanternfield LF-8" })).toBeVisible();
    await page.getByLabel("Driver file").setInputFiles({ name: "new.driver.json", mimeType: "application/json", buffer: Buffer.from(JSON.stringify(first)) });
    await expect(page.getByRole("heading", { name: "Version 1.0.0, draft" })).toBeVisible();
    await page.getByRole("button", { name: "Run conformance" }).click();
    await expect(page.getByText(/Green: all of/u)).toBeVisible({ timeout: 120_000 });
    await page.getByRole("button", { name: "Publish" }).click();
    await expect(page.getByRole("heading", { name: "Version 1.0.0, published" })).toBeVisible();
  });

  const ownerContext = await browser.newContext({ baseURL, bypassCSP: true, extraHTTPHeaders: { "x-forwarded-for": "10.9.9.9" } });
  const owner = await ownerContext.newPage();
  await test.step("an owner backs such a device up, and has a recording of it", async () => {
    await register(owner);
    await owner.getByLabel("Model").selectOption({ label: `Lanternfield ${model}` });
    await connect(owner, "simulated");
    await owner.getByRole("button", { name: "Back up", exact: true }).click();
    await settled(owner);
    await expect(owner.getByText("Backed up, the first of this device.")).toBeVisible({ timeout: READ_MS });
    await owner.getByRole("region", { name: "Wire log" }).getByRole("button", { name: "Open" }).click();
    const saved = owner.waitForEvent("download");
    await owner.getByRole("button", { name: "Save a recording" }).click();
    const path = await (await saved).path();
    await owner.goto("/recordings");
    await expect(owner.getByRole("heading", { name: "No recording yet" })).toBeVisible();
    await owner.getByLabel("Recording file").setInputFiles(path);
    await owner.getByLabel("Name", { exact: true }).fill(`As it was read, ${model}`);
    await owner.getByRole("button", { name: "Upload" }).click();
    await expect(owner.getByText(/The driver says the same in all of/u)).toBeVisible();
    await owner.goto(`/drivers/${slug}?part=questions`);
    await owner.getByLabel("Question", { exact: true }).fill("Brightness stops at 150 %. Can it go further?");
    await owner.getByLabel("Recording", { exact: true }).selectOption({ label: `As it was read, ${model}` });
    await owner.getByRole("button", { name: "Ask", exact: true }).click();
    await expect(owner.getByText("Brightness stops at 150 %. Can it go further?")).toBeVisible();
  });

  await test.step("a new draft: a mistake is named by its path, and the bytes change as it is typed", async () => {
    await page.getByRole("button", { name: "New draft from this" }).click();
    await page.getByRole("dialog").getByRole("button", { name: "New draft" }).click();
    await expect(page.getByRole("heading", { name: "Version 1.1.0, draft" })).toBeVisible();
    const text = page.getByRole("textbox", { name: "Definition" });
    const before = await text.inputValue();
    const problems = page.getByRole("region", { name: "Problems" });
    await text.fill(before.replace('"retries": ', '"retries": 77'));
    await expect(problems.getByText("pace.retries")).toBeVisible();
    await page.getByLabel("Find a command").fill("read offsetpx");
    const command = page.getByRole("region", { name: "read slots[1].placement.offsetPx" });
    await expect(command.getByText(/^SLOT1:HPOS\?\*/u)).toBeVisible();
    await text.fill(before.replaceAll(RIGHT_WORD, WRONG_WORD).replace('"max": 150', '"max": 160'));
    await expect(command.getByText(/^SLOT1:HOFFS\?\*/u)).toBeVisible();
    await page.getByRole("button", { name: "Save" }).click();
    await expect(page.getByText(/^Saved\./u)).toBeVisible();
  });

  await test.step("the recording refutes it: red, with the first byte that differs; put right, it is green", async () => {
    await page.getByRole("button", { name: "Run conformance" }).click();
    await expect(page.getByText(/Red: /u)).toBeVisible({ timeout: 120_000 });
    await expect(page.getByText(/the driver says what was said/u)).toBeVisible();
    await expect(page.getByRole("button", { name: "Publish" })).toBeDisabled();

    const shown = await page.context().newPage();
    await shown.goto(`/drivers/${slug}?version=1.1.0&part=recordings`);
    await shown.getByRole("link", { name: `As it was read, ${model}` }).click();
    await expect(shown.getByText(/expected 50, “P”, got 4F, “O”/u).first()).toBeVisible();
    await shown.close();

    const text = page.getByRole("textbox", { name: "Definition" });
    await text.fill((await text.inputValue()).replaceAll(WRONG_WORD, RIGHT_WORD));
    await page.getByLabel("Note for owners").fill("Brightness goes to 160 %.");
    await page.getByRole("button", { name: "Save" }).click();
    await expect(page.getByText(/^Saved\./u)).toBeVisible();
    await page.getByRole("button", { name: "Run conformance" }).click();
    await expect(page.getByText(/Green: all of/u)).toBeVisible({ timeout: 120_000 });
    await page.getByRole("button", { name: "Publish" }).click();
    await expect(page.getByRole("heading", { name: "Version 1.1.0, published" })).toBeVisible();
  });

  await test.step("the owner is told, sees what is read differently, and moves; the bench then reads with it", async () => {
    await owner.goto("/backups");
    const notices = owner.getByRole("list", { name: "Notices about drivers" });
    await expect(notices.getByText(/Driver 1\.1\.0 is out; this device is read with 1\.0\.0\./u)).toBeVisible();
    await expect(notices.getByText("Brightness goes to 160 %.")).toBeVisible();
    await notices.getByRole("button", { name: "See what it reads differently" }).click();
    const dialog = owner.getByRole("dialog");
    await expect(dialog.getByText("Nothing: every value is read and means the same.")).toBeVisible();
    await expect(dialog.getByText(/1\sdifference in what the driver says|differences in what the driver says/u)).toBeVisible();
    await dialog.getByRole("button", { name: "Move" }).click();
    await expect(notices).toHaveCount(0);
    await owner.goto("/bench");
    await owner.getByLabel("Model").selectOption({ label: `Lanternfield ${model}` });
    const read = owner.waitForResponse((answer) => answer.url().includes(`/api/drivers/${slug}/versions/1.1.0`));
    await connect(owner, "simulated");
    expect((await read).ok()).toBe(true);
  });

  await test.step("a draft that somebody else saved meanwhile is told, and nothing that was typed is lost", async () => {
    await page.getByRole("button", { name: "New draft from this" }).click();
    await page.getByRole("dialog").getByRole("button", { name: "New draft" }).click();
    await expect(page.getByRole("heading", { name: "Version 1.2.0, draft" })).toBeVisible();
    const other = await page.context().newPage();
    await other.goto(`/drivers/${slug}/versions/1.2.0`);
    await other.getByLabel("Note for owners").fill("From another window");
    await other.getByRole("button", { name: "Save" }).click();
    await expect(other.getByText(/^Saved\./u)).toBeVisible();
    await other.close();
    await page.getByLabel("Note for owners").fill("From this window");
    await page.getByRole("button", { name: "Save" }).click();
    await expect(page.getByText(/Your text is still here\./u)).toBeVisible();
    await expect(page.getByLabel("Note for owners")).toHaveValue("From this window");
    await page.getByRole("button", { name: "Keep my text, then save over theirs" }).click();
    await page.getByRole("button", { name: "Save" }).click();
    await expect(page.getByText(/^Saved\./u)).toBeVisible();
  });

  await test.step("a withdrawn version is told to its owners with the reason", async () => {
    await page.goto(`/drivers/${slug}?version=1.1.0`);
    await page.getByRole("button", { name: "Withdraw" }).click();
    await page.getByRole("dialog").getByLabel("Why").fill("The made-up device was taken apart.");
    await page.getByRole("dialog").getByRole("button", { name: "Withdraw" }).click();
    await expect(page.getByRole("heading", { name: "Version 1.1.0, withdrawn" })).toBeVisible();
    await owner.goto("/backups");
    await expect(owner.getByText(/was withdrawn\. Version 1\.0\.0 is published\./u)).toBeVisible();
    await expect(owner.getByText("The made-up device was taken apart.")).toBeVisible();
  });
  await ownerContext.close();
});
