import { demoAccount } from "@/db/demo/accounts";
import { expect, test } from "@/tests/e2e/fixtures";
import { expectWhole, register } from "@/tests/e2e/pages-steps";

test("pages of an owner lead to the sign-in and back", async ({ page }) => {
  await page.goto("/backups");
  await expect(page).toHaveURL(/\/sign-in\?from=%2Fbackups$/u);
  const { email, password } = demoAccount("tobin");
  await page.getByLabel("E-mail address").fill(email);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Sign in", exact: true }).click();
  await page.waitForURL("**/backups");
  await expect(page.getByRole("heading", { level: 1, name: "Backups" })).toBeVisible();
});

test("a wrong password is told beside its field, without saying whether the address is known", async ({ page }) => {
  await page.goto("/sign-in");
  for (const email of ["tobin@saltmarsh.example", "nobody@saltmarsh.example"]) {
    await page.getByLabel("E-mail address").fill(email);
    await page.getByLabel("Password").fill("not the password");
    await page.getByRole("button", { name: "Sign in", exact: true }).click();
    await expect(page.getByText("Address or password is wrong.")).toBeVisible();
    await page.reload();
  }
});

test("an address elsewhere is no place to return to", async ({ page }) => {
  await page.goto(`/register?from=${encodeURIComponent("//elsewhere.example/")}`);
  await page.getByLabel("Name").fill("Odile B.");
  await page.getByLabel("E-mail address").fill(`odile.${Date.now()}@example.org`);
  await page.getByLabel("Password").fill("a long plain password");
  await page.getByRole("button", { name: "Register" }).click();
  await page.waitForURL("**/bench");
});

test("name, password and sessions can be changed, and another browser is signed out", async ({
  page,
  browser,
  expectAccessible,
}) => {
  await register(page, "/account");
  await expect(page.getByRole("heading", { level: 1, name: "Account" })).toBeVisible();
  const email = await page.getByText(/@example\.org/u).innerText();
  await expectAccessible(page);

  await page.getByRole("textbox", { name: "Name" }).fill("Tove H.");
  await page.getByRole("button", { name: "Change name" }).click();
  await expect(page.getByRole("banner").getByText("Tove H.")).toBeVisible();

  const other = await browser.newContext();
  const there = await other.newPage();
  await there.goto("/sign-in?from=/account");
  await there.getByLabel("E-mail address").fill(email.split(",")[0] ?? "");
  await there.getByLabel("Password").fill("a long plain password");
  await there.getByRole("button", { name: "Sign in", exact: true }).click();
  await there.waitForURL("**/account");

  await page.getByLabel("Password now").fill("wrong password");
  await page.getByLabel("New password").fill("another plain password");
  await page.getByRole("button", { name: "Change password" }).click();
  await expect(page.getByText("This is not the password.")).toBeVisible();
  await page.getByLabel("Password now").fill("a long plain password");
  await page.getByRole("button", { name: "Change password" }).click();
  await expect(page.getByText(/Password changed\. 1\s+other browser was signed out\./u).first()).toBeVisible();
  await there.goto("/account");
  await expect(there).toHaveURL(/\/sign-in/u);
  await other.close();

  await page.getByRole("button", { name: /Tove H\./u }).click();
  await page.getByRole("menuitem", { name: "Sign out" }).click();
  await expect(page.getByRole("link", { name: "Sign in" })).toBeVisible();
});

test("the account page is whole by day, by night and on a phone of 360 px", async ({ page, expectAccessible }) => {
  await register(page, "/account");
  await expect(page.getByRole("heading", { name: "Sessions" })).toBeVisible();
  await expectWhole(page, expectAccessible);
});
