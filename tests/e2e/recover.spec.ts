import { expect } from "@/tests/e2e/fixtures";
import { chooseScreen, connect, moveBy, READ_MS, register, settled, test, trial, tryIt } from "@/tests/e2e/bench-steps";

test("the cable comes out during a backup: nothing half read is stored, and the page offers the way on", async ({ page }) => {
  await register(page);
  await connect(page, "simulated");
  await page.getByRole("button", { name: "Back up", exact: true }).click();
  await settled(page);
  await page.getByRole("button", { name: "Back up", exact: true }).click();
  await expect(page.getByRole("progressbar", { name: "Settings read" })).toBeVisible();
  await page.getByRole("button", { name: "Pull the cable" }).click();
  await expect(page.getByText("The device is out of reach.")).toBeVisible();
  await page.getByRole("button", { name: "Plug in and connect" }).click();
  await settled(page);
  await page.getByRole("link", { name: "See the backups" }).click();
  await expect(page.getByText("Simulated LF-8").first()).toBeVisible();
});

test("the cable comes out during a trial: on connecting again the trial goes on, and can be put back", async ({ page }) => {
  await register(page);
  await connect(page, "simulated");
  await chooseScreen(page, "Any 525-line television");
  await moveBy(page, "Horizontal position", 2);
  await tryIt(page);
  await page.getByRole("button", { name: "Pull the cable" }).click();
  await expect(page.getByText("The device is out of reach.")).toBeVisible();
  await page.getByRole("button", { name: "Plug in and connect" }).click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await page.getByRole("button", { name: "Put back", exact: true }).click();
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS });
});

test("the device restarts during a trial: Keep is never kept, the former values stand", async ({ page }) => {
  await register(page);
  await connect(page, "simulated");
  await chooseScreen(page, "Any 525-line television");
  await moveBy(page, "Horizontal position", 2);
  await tryIt(page);
  await page.getByRole("button", { name: "Switch it off and on" }).click();
  await page.getByRole("button", { name: "Keep", exact: true }).click();
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS + 15_000 });
});

test("the tab is closed during a trial over TCP: the run is taken up from its journal, and kept", async ({ page, prepareWire }) => {
  await prepareWire(page, "sim over TCP");
  page.on("dialog", (dialog) => void dialog.accept());
  await register(page);
  await connect(page, "sim over TCP");
  await chooseScreen(page, "Any 525-line television");
  await moveBy(page, "Horizontal position", 2);
  await page.getByRole("button", { name: "Review the plan" }).click();
  for (const box of await page.getByRole("checkbox", { name: "I have read this" }).all()) await box.click();
  await page.getByLabel("Length of the trial").selectOption("120");
  await page.getByRole("button", { name: "Back up and try" }).click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await page.reload();
  await page.getByRole("button", { name: "Choose a port" }).click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await page.getByRole("button", { name: "Keep", exact: true }).click();
  await expect(trial(page, "kept")).toBeVisible({ timeout: READ_MS });
  await settled(page);
});
