import { expect, test } from "@/tests/e2e/fixtures";
import { expectWhole, signInAs } from "@/tests/e2e/pages-steps";

test("devices at a glance and two backups compared, by day, by night and on a phone of 360 px", async ({
  page,
  expectAccessible,
}) => {
  await signInAs(page, "imke", "/backups");
  const devices = page.getByRole("navigation", { name: "Devices" });
  await expect(devices.getByText("differs from known good").first()).toBeVisible();
  await expect(devices.getByText("as known good", { exact: true }).first()).toBeVisible();
  await expect(page.getByRole("table", { name: /^Backups of/u })).toBeVisible();
  await expect(page.getByRole("table", { name: "What changed between the two backups" })).toBeVisible();
  await expectWhole(page, expectAccessible);
  await page
    .getByLabel("To", { exact: true })
    .selectOption(await page.getByLabel("From", { exact: true }).inputValue());
  await expect(page.getByText("This is one backup.")).toBeVisible();
});

test("a backup is renamed, pinned, deleted and taken back", async ({ page }) => {
  await signInAs(page, "imke", "/backups");
  await page
    .getByRole("navigation", { name: "Devices" })
    .getByRole("link", { name: /^Workshop bench/u })
    .click();
  const table = page.getByRole("table", { name: "Backups of Workshop bench" });
  await expect(table).toBeVisible();
  const first = table.getByRole("row").nth(1);
  const act = async (name: string) => {
    await first.getByRole("button", { name: /^Acts on/u }).click();
    await page.getByRole("menuitem", { name }).click();
  };
  const name = `Looked at ${Date.now()}`;
  await act("Rename");
  await page.getByRole("dialog").getByLabel("Name").fill(name);
  await page.getByRole("dialog").getByRole("button", { name: "Rename" }).click();
  await expect(first.getByRole("link", { name })).toBeVisible();
  await act("Pin as known good");
  await expect(first.getByText("known good")).toBeVisible();
  await act("No longer known good");
  await expect(first.getByText("known good")).toHaveCount(0);
  await act("Delete");
  await expect(table.getByRole("link", { name })).toHaveCount(0);
  await page.getByRole("button", { name: "Undo" }).click();
  await expect(table.getByRole("link", { name })).toBeVisible();
});

test("a backup shows all that it holds, and leads to restoring and publishing it", async ({
  page,
  expectAccessible,
}) => {
  await signInAs(page, "imke", "/backups");
  await page
    .getByRole("table", { name: /^Backups of/u })
    .getByRole("link")
    .first()
    .click();
  await expect(page.getByRole("heading", { name: "Modes" })).toBeVisible();
  await expect(page.getByRole("link", { name: "Restore" })).toHaveAttribute(
    "href",
    /^\/bench\?restore=[0-9a-f-]{36}$/u,
  );
  await expect(page.getByRole("link", { name: "Publish as a profile" })).toHaveAttribute(
    "href",
    /^\/library\/publish\?backup=/u,
  );
  await expectWhole(page, expectAccessible);
});

test("another owner's backup is not there", async ({ page, browser }) => {
  await signInAs(page, "imke", "/backups");
  const href = await page
    .getByRole("table", { name: /^Backups of/u })
    .getByRole("link")
    .first()
    .getAttribute("href");
  const other = await browser.newContext();
  const there = await other.newPage();
  await signInAs(there, "tobin", href ?? "");
  await expect(there.getByText("This is not here any more.")).toBeVisible();
  await other.close();
});
