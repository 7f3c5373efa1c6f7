import { expect } from "@/tests/e2e/fixtures";
import type { Page } from "@playwright/test";
import { chooseScreen, connect, moveBy, READ_MS, readCautions, settled, test, trial, tryIt } from "@/tests/e2e/bench-steps";
import { bridgeSerial } from "@/tests/e2e/serial-bridge";
import { register } from "@/tests/e2e/pages-steps";

/** Registers, connects the device outside and plans a move, ready to be tried for as long as a trial may take. */
async function planOverTcp(page: Page): Promise<void> {
  page.on("dialog", (dialog) => void dialog.accept());
  await register(page);
  await connect(page, "sim over TCP");
  await chooseScreen(page, "Any 525-line television");
  await moveBy(page, "Horizontal position", 2);
  await page.getByRole("button", { name: "Review the plan" }).click();
  await readCautions(page);
  await page.getByLabel("Length of the trial").selectOption("120");
}

const start = (page: Page) => page.getByRole("button", { name: "Back up and try" }).click();
const button = (page: Page, name: string) => page.getByRole("button", { name, exact: true });

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

/** The last word of a run that was taken up in the midst: the owner puts the former values back, if that is not done yet. */
async function putBackByOwner(page: Page): Promise<void> {
  await button(page, "Choose a port").click();
  const done = trial(page, "put-back");
  const offer = button(page, "Put back");
  await expect(done.or(offer).first()).toBeVisible({ timeout: READ_MS });
  if (!(await done.isVisible())) await offer.click();
  await expect(done).toBeVisible({ timeout: READ_MS });
  await settled(page);
}

test("the page is reloaded in a write, and again while putting back: each time the owner can put the old values back", async ({ page, startDevice }) => {
  const bridge = await bridgeSerial(page, await startDevice());
  await planOverTcp(page);
  const inWrite = bridge.whenSent("HPOS 2");
  await start(page);
  await inWrite;
  await page.reload();
  await button(page, "Choose a port").click();
  await expect(button(page, "Put back")).toBeVisible({ timeout: READ_MS });
  // The value is on the device already, so putting back writes it again: cut off in that very write.
  const inPutBack = bridge.whenSent("HPOS 0");
  await button(page, "Put back").click();
  await inPutBack;
  await page.reload();
  await putBackByOwner(page);
  await expect(page.getByRole("slider", { name: /Horizontal position/u })).toHaveAttribute("aria-valuenow", "0");
});

test("the page is reloaded in a trial, and again in the commit: it is kept by what the device says, not by the last word", async ({ page, startDevice }) => {
  const bridge = await bridgeSerial(page, await startDevice());
  await planOverTcp(page);
  await start(page);
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await page.reload();
  await button(page, "Choose a port").click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  const inCommit = bridge.whenSent("MEM:COMMIT*");
  await button(page, "Keep").click();
  await inCommit;
  await page.reload();
  await button(page, "Choose a port").click();
  await expect(trial(page, "kept")).toBeVisible({ timeout: READ_MS });
  await settled(page);
  await expect(page.getByRole("slider", { name: /Horizontal position/u })).toHaveAttribute("aria-valuenow", "2");
});

test("a twin of the device is plugged in during a trial: it is refused, and the right one is taken up", async ({ page, startDevice }) => {
  const first = await startDevice("LF8-1001");
  const twin = await startDevice("LF8-2002");
  const bridge = await bridgeSerial(page, first);
  await planOverTcp(page);
  await start(page);
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  bridge.leadTo(twin);
  await bridge.unplug();
  await expect(page.getByText("The device is out of reach.")).toBeVisible();
  await bridge.plugIn();
  const inWrite = bridge.whenSent("HPOS ").then(() => true);
  await button(page, "Connect again").click();
  await expect(page.getByText("Another device answers than the one that this run began with.").first()).toBeVisible({ timeout: READ_MS });
  expect(await Promise.race([inWrite, Promise.resolve(false)]), "a write reached the twin").toBe(false);
  await bridge.unplug();
  bridge.leadTo(first);
  await bridge.plugIn();
  await button(page, "Connect again").click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await button(page, "Put back").click();
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS });
});

test("the server is away during a run: it goes on, and its journal is delivered later", async ({ page, startDevice }) => {
  await bridgeSerial(page, await startDevice());
  await planOverTcp(page);
  await start(page);
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
  await page.route("**/api/**", (route) => route.abort("connectionrefused"));
  await button(page, "Put back").click();
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS });
  const runs = async () => (await (await page.request.get("/api/runs")).json()) as { items: { id: string; state: string }[] };
  expect((await runs()).items.map(({ state }) => state)).toEqual(["trying"]);
  await page.unroute("**/api/**");
  await expect.poll(async () => (await runs()).items.map(({ state }) => state), { timeout: 30_000 }).toEqual(["put-back"]);
});

test("two tabs: a run that one holds is refused to the other", async ({ page, context }) => {
  await register(page);
  await connect(page, "simulated");
  await chooseScreen(page, "Any 525-line television");
  await moveBy(page, "Horizontal position", 2);
  await tryIt(page, "120");
  const other = await context.newPage();
  await other.goto("/bench");
  await connect(other, "simulated");
  await expect(other.getByText(/Another tab of this browser has a run open on this device/u)).toBeVisible({ timeout: READ_MS });
  await expect(trial(other, "trying")).toHaveCount(0);
  await button(page, "Put back").click();
  await expect(trial(page, "put-back")).toBeVisible({ timeout: READ_MS });
});
