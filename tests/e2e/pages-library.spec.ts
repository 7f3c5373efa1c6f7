import { expect, test } from "@/tests/e2e/fixtures";
import { expectWhole, PHONE, register, signInAs } from "@/tests/e2e/pages-steps";

test("the library is searched and held against a screen, and the address keeps the wish", async ({ page }) => {
  await page.goto("/library");
  const table = page.getByRole("table", { name: "Profiles" });
  await expect(table).toBeVisible();
  await expect(page.getByText("Demo: the Saltmarsh Play Archive")).toBeVisible();
  await page.getByLabel("Search").fill("31 khz");
  await expect(page).toHaveURL(/q=31\+khz/u);
  await expect(table.getByRole("row")).toHaveCount(2);
  await page.getByLabel("Hold against").selectOption({ label: "Any 525-line television" });
  await expect(table.getByText("no mode fits")).toBeVisible();
  await expect(page).toHaveURL(/bt470-525/u);
  await page.reload();
  await expect(page.getByLabel("Search")).toHaveValue("31 khz");
  await expect(table.getByText("no mode fits")).toBeVisible();
  await page.getByLabel("Search").fill("no profile has these words");
  await expect(page.getByRole("heading", { name: "Nothing matches" })).toBeVisible();
  await page.getByRole("button", { name: "Show all profiles" }).click();
  await expect(page.getByLabel("Search")).toHaveValue("");
  await expect(table).toBeVisible();
});

test("columns sort both ways by the keyboard", async ({ page }) => {
  await page.goto("/library");
  const titles = page.getByRole("table", { name: "Profiles" }).getByRole("row").locator("td:first-child a");
  await expect(titles.first()).toBeVisible();
  const byName = (texts: readonly string[]) =>
    [...texts].sort((a, b) => a.localeCompare(b, "en-GB", { numeric: true, sensitivity: "base" }));
  await page.getByRole("button", { name: "Profile", exact: true }).press("Enter");
  await expect(page.getByRole("columnheader", { name: "Profile" })).toHaveAttribute("aria-sort", "ascending");
  expect(await titles.allInnerTexts()).toEqual(byName(await titles.allInnerTexts()));
  await page.getByRole("button", { name: "Profile", exact: true }).press("Enter");
  expect(await titles.allInnerTexts()).toEqual(byName(await titles.allInnerTexts()).reverse());
});

test("a profile is checked against a screen, two revisions compared, exported, by day, by night and at 360 px", async ({
  page,
  expectAccessible,
}) => {
  await page.goto("/library?q=film+prop");
  await page.getByRole("link", { name: /Film prop/u }).click();
  await expect(page.getByRole("heading", { name: "Slots" })).toBeVisible();
  await page.getByLabel("Hold against").selectOption({ label: "Any 31 kHz monitor, one rate" });
  await expect(page.getByText(/must change$/u)).toBeVisible();
  await expect(page.getByRole("table", { name: /What changed from revision/u })).toBeVisible();
  await expectWhole(page, expectAccessible);
  const download = page.waitForEvent("download");
  await page.getByRole("link", { name: "Export .porch.json" }).click();
  expect((await download).suggestedFilename()).toMatch(/\.porch\.json$/u);
  await expect(page.getByRole("link", { name: "Apply" })).toHaveAttribute(
    "href",
    /^\/bench\?apply=[0-9a-f-]{36}&revision=\d+$/u,
  );
  await page.setViewportSize(PHONE);
  await expect(page.getByRole("link", { name: "Apply" })).toBeInViewport();
});

test("a file goes in as it came out; a bad one changes nothing and says where", async ({ page }) => {
  await register(page, "/library");
  const document = {
    format: "backporch-profile",
    version: 1,
    title: "Carried over",
    slots: [{ number: 1, name: "Corner set" }],
  };
  const file = (name: string, text: string) => ({ name, mimeType: "application/json", buffer: Buffer.from(text) });
  await page
    .getByLabel("Profile file")
    .setInputFiles(file("bad.porch.json", JSON.stringify({ ...document, slots: [{ number: "one" }] })));
  const dialog = page.getByRole("dialog", { name: "The file was not imported" });
  await expect(dialog.getByText("slots[0].number")).toBeVisible();
  await dialog.getByRole("button", { name: "Close" }).first().click();
  await page.getByLabel("Profile file").setInputFiles(file("carried.porch.json", JSON.stringify(document)));
  await expect(page.getByRole("heading", { level: 1, name: "Carried over" })).toBeVisible();
  await expect(page.getByText("Corner set")).toBeVisible();

  await page.getByRole("button", { name: "More" }).click();
  await page.getByRole("menuitem", { name: "Delete" }).click();
  await page.getByRole("alertdialog").getByRole("button", { name: "Delete" }).click();
  await expect(page.getByRole("heading", { level: 1, name: "Library" })).toBeVisible();
});

test("some slots of a backup are published as a profile", async ({ page, expectAccessible }) => {
  await signInAs(page, "imke", "/library/publish");
  await expect(page.getByRole("heading", { name: "About it" })).toBeVisible();
  const slots = page.getByRole("checkbox");
  await slots.first().click();
  await page.getByRole("button", { name: "Publish", exact: true }).click();
  await expect(page.getByText("Give it a title.")).toBeVisible();
  await expectWhole(page, expectAccessible);
  const title = `From the cabinet ${Date.now()}`;
  await page.getByLabel("Title").fill(title);
  await page.getByRole("button", { name: "Publish", exact: true }).click();
  await expect(page.getByRole("heading", { level: 1, name: title })).toBeVisible();
  await expect(page.getByText(/private/u).first()).toBeVisible();
});
