import { expect } from "@/tests/e2e/fixtures";
import { chooseScreen, connect, moveBy, READ_MS, settled, test, trial, tryIt, wireText } from "@/tests/e2e/bench-steps";
import { signInAs } from "@/tests/e2e/pages-steps";

test("a run's request leads to its bytes; the log is searched and held still", async ({ page, expectAccessible }) => {
  await page.goto("/bench");
  await connect(page, "simulated");
  await chooseScreen(page, "Any 525-line television");
  await moveBy(page, "Horizontal position", 2);
  await tryIt(page);
  await page.getByText(/requests? of this run/u).click();
  await page.getByRole("button", { name: /^Bytes of: Write Slot 1, Horizontal position/u }).click();
  const log = page.getByRole("region", { name: "Wire log" });
  const marked = log.locator("tr[aria-current=true]");
  await expect(marked.first()).toBeInViewport();
  await expect(marked.first()).toContainText("SLOT1:HPOS 2");
  await expect(log.getByText(/^Paused/u)).toBeVisible();
  await expectAccessible(page);
  await log.getByLabel("Search").fill("timer:arm");
  await log.getByLabel("Search").press("Enter");
  await expect(marked).toHaveCount(1);
  await expect(marked).toContainText("TIMER:ARM");
  await expect(marked).toBeInViewport();
  await page.getByRole("button", { name: "Put back", exact: true }).click();
  await expect(log.getByText(/Paused; [1-9]/u)).toBeVisible();
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS });
  await log.getByRole("button", { name: "Go on" }).click();
  await expect(log.getByText(/^Paused/u)).toHaveCount(0);
});

test("a maintainer lets a device go wrong: a flipped bit is asked again, a write that is not done is put back", async ({ page }) => {
  await signInAs(page, "maren", "/bench");
  await connect(page, "simulated");
  await chooseScreen(page, "Any 525-line television");
  await page.getByText("Faults of this device and its wire").click();
  await page.getByLabel("Byte, counted from now").fill("40");
  await page.getByRole("button", { name: "Set this fault" }).click();
  await expect(page.getByRole("list", { name: "Faults that are set" })).toContainText("one bit turned over");
  await page.getByRole("button", { name: "Back up", exact: true }).click();
  await settled(page);
  await expect(page.getByText(/Backed up/u).first()).toBeVisible();
  expect((await wireText(page, "noise")).length).toBeGreaterThan(0);

  await page.getByLabel("Where").selectOption("device");
  await page.getByLabel("What happens").selectOption("ignore");
  await page.getByLabel("At", { exact: true }).selectOption("write");
  await page.getByLabel("When").selectOption("lasting");
  await page.getByLabel("Request, counted from now").fill("1");
  await page.getByRole("button", { name: "Set this fault" }).click();
  await moveBy(page, "Horizontal position", 2);
  await page.getByRole("button", { name: "Review the plan" }).click();
  for (const box of await page.getByRole("checkbox", { name: "I have read this" }).all()) await box.click();
  await page.getByRole("button", { name: "Back up and try" }).click();
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS });
  await expect(trial(page, "trying")).toHaveCount(0);
});
