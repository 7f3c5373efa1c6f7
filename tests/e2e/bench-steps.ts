import type { Page } from "@playwright/test";
import { expect, test as base } from "@/tests/e2e/fixtures";
import { bridgeSerial, type SerialBridge } from "@/tests/e2e/serial-bridge";
import { startSim, type SimProcess } from "@/tests/peers/serial/sim-process";

/** How the page reaches its device: the simulated one inside it, or `npm run sim` over TCP. */
export type Wire = "simulated" | "sim over TCP";

/** Longer than any whole read at the wire's own pace, on a busy machine. */
export const READ_MS = 60_000;

/** Every way that a page can reach a device in these tests. */
export const WIRES: readonly Wire[] = ["simulated", "sim over TCP"];

type Fixtures = {
  /** Makes the page ready for a wire, before it is opened. The device outside ends with the test. */
  readonly prepareWire: (page: Page, wire: Wire) => Promise<SerialBridge | null>;
  /** Starts a device outside the browser, and says where it listens. It ends with the test. */
  readonly startDevice: (serialNumber?: string) => Promise<{ readonly host: string; readonly port: number }>;
};

export const test = base.extend<Fixtures>({
  startDevice: async ({}, provide) => {
    const started: SimProcess[] = [];
    await provide(async (serialNumber) => {
      const named = serialNumber === undefined ? [] : ["--serial", serialNumber];
      const sim = await startSim(["--driver", "lanternfield-lf8", "--tcp", "127.0.0.1:0", "--baud", "none", ...named]);
      started.push(sim);
      return { host: "127.0.0.1", port: Number(sim.line.split(":").at(-1)) };
    });
    await Promise.all(started.map((sim) => sim.stop()));
  },
  prepareWire: async ({ startDevice }, provide) => {
    await provide(async (page, wire) => (wire === "simulated" ? null : bridgeSerial(page, await startDevice())));
  },
});

/** Connects, and waits until the device was read whole. */
export async function connect(page: Page, wire: Wire): Promise<void> {
  await page.getByRole("button", { name: wire === "simulated" ? "Use a simulated device" : "Choose a port" }).click();
  await expect(page.getByRole("heading", { name: "Slots" })).toBeVisible({ timeout: READ_MS });
  await settled(page);
}

/** Nothing is under way any more. */
export async function settled(page: Page): Promise<void> {
  await expect(page.getByRole("button", { name: "Back up", exact: true })).toBeEnabled({ timeout: READ_MS });
}

export async function chooseScreen(page: Page, label: string): Promise<void> {
  await page.getByLabel("Screen", { exact: true }).selectOption({ label });
}

/** Ticks every caution under review. */
export async function readCautions(page: Page): Promise<void> {
  const open = page.getByRole("checkbox", { name: "I have read this", checked: false });
  // Bounded: no demo plan has so many cautions.
  for (let n = 0; n < 40 && (await open.count()) > 0; n += 1) await open.first().click();
  await expect(open).toHaveCount(0);
}

/** The trial bar in one of its states. */
export function trial(page: Page, state: string) {
  return page.locator(`[data-run-state="${state}"]`);
}

/** Moves a figure by so many of the device's steps. */
export async function moveBy(page: Page, label: string, steps: number): Promise<void> {
  const slider = page.getByRole("slider", { name: new RegExp(label, "u") });
  for (let n = 0; n < Math.abs(steps); n += 1) await slider.press(steps > 0 ? "ArrowRight" : "ArrowLeft");
}

/** Reviews what was changed by hand, and tries it for 30 s, or for as long as the page is looked at. */
export async function tryIt(page: Page, seconds: "30" | "120" = "30"): Promise<void> {
  await page.getByRole("button", { name: "Review the plan" }).click();
  await readCautions(page);
  await page.getByLabel("Length of the trial").selectOption(seconds);
  await page.getByRole("button", { name: "Back up and try" }).click();
  await expect(trial(page, "trying")).toBeVisible({ timeout: READ_MS });
}

/** The texts of the wire log that have the filter in them. */
export async function wireText(page: Page, filter: string): Promise<string[]> {
  const log = page.getByRole("region", { name: "Wire log" });
  if ((await log.getByRole("button", { name: "Open" }).count()) > 0) await log.getByRole("button", { name: "Open" }).click();
  await log.getByLabel("Filter").fill(filter);
  await expect(log.getByRole("region", { name: "Exchanges" })).toBeVisible();
  return log.locator("tbody[data-lines] tr td:nth-child(3)").allInnerTexts();
}
