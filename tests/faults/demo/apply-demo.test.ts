import { expect, test } from "vitest";
import { demoDevices, type DemoDevice } from "@/db/demo/devices";
import { demoScreens } from "@/db/demo/screens";
import { demoProfiles } from "@/db/demo/seed-profiles";
import type { ProfileDocument } from "@/lib/profile/document";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming } from "@/lib/timing/raster";
import { applyPatch } from "@/lib/profile/paths";
import { takeBackup } from "@/lib/serial/backup/take-backup";
import { shippedDriver } from "@/lib/serial/drivers/shipped";
import { allowedRasters } from "@/lib/serial/plan/allowed-rasters";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import type { Planned, PlanInput } from "@/lib/serial/plan/types";
import { createRun } from "@/lib/serial/run/create-run";
import { connect, type Rig } from "@/tests/unit/serial/simulated-rig";
import { journalOf } from "@/tests/unit/serial/run/run-rig";

/** Longer than any countdown: the virtual clock goes there at once. */
const PAST_COUNTDOWN_MS = 40_000;

type Applied = { readonly notAllowed: readonly (RasterTiming | null)[] };

/** The device as its last demo backup left it, on a wire, with a session. */
async function deviceOf(device: DemoDevice): Promise<Rig> {
  const values = Object.assign({}, ...device.backups.map(({ changes }) => changes)) as Record<string, string | number>;
  const last = device.backups.at(-1);
  const { serialNumber, firmware } = device;
  return connect(compiledDriver(shippedDriver(device.driverSlug)), { values, serialNumber, firmware, activeSlot: last?.activeSlot, source: last?.source ?? null }, "none");
}

function envelopeOf(device: DemoDevice): ScreenEnvelope {
  const screen = demoScreens.find(({ key }) => key === device.screen);
  if (!screen) throw new Error(`no screen ${device.screen}`);
  return screen.envelope;
}

/** A profile with the names that this device can show: the remedy that each of these stops offers. */
function renamed(document: ProfileDocument, { findings }: Planned): ProfileDocument {
  const remedies = findings.filter(({ rule }) => rule.startsWith("device.name")).flatMap((finding) => finding.remedies.slice(0, 1));
  return remedies.length === 0 ? document : applyPatch(document, remedies.flatMap((remedy) => (remedy.kind === "set" ? remedy.patch : [])));
}

/** Plans as an owner would: names mended by a click, slots that are still stopped left out, every caution read. */
function planReading(input: Omit<PlanInput, "target">, document: ProfileDocument): Planned {
  const towards = (wanted: ProfileDocument, more: Partial<PlanInput> = {}) => planChanges({ ...input, target: { kind: "profile", document: wanted }, ...more });
  const first = towards(document);
  const mended = renamed(document, first);
  // The same input gives the same plan: it is made again only where something of the input is another.
  const again = mended === document ? first : towards(mended);
  const leftOut = [...new Set(again.findings.filter(({ severity }) => severity === "stop").flatMap(({ slots }) => slots))];
  const without = leftOut.length === 0 ? again : towards(mended, { leftOut });
  return without.toAcknowledge.length === 0 ? without : towards(mended, { leftOut, acknowledged: [...without.toAcknowledge].sort() });
}

async function apply(device: DemoDevice, document: ProfileDocument): Promise<Applied | null> {
  const rig = await deviceOf(device);
  const { clock, session, driver, identity } = rig;
  const taken = await clock.run(takeBackup(session, driver));
  if (!taken.ok) throw new Error(taken.error.message);
  const { content, activeSlot, rasterOut, arriving } = taken.value;
  const { plan } = planReading({
    backup: content, leftOut: [], driver: driver.definition, screen: envelopeOf(device), source: arriving, activeSlot, rasterOut, acknowledged: [],
  }, document);
  if (!plan) {
    await clock.run(session.close());
    return null;
  }
  const allowed = allowedRasters({ screen: plan.input.screen, before: plan.rasterBefore, after: plan.rasterAfter });
  const notAllowed: (RasterTiming | null)[] = [];
  rig.device.onRaster((raster) => {
    if (!allowed(raster)) notAllowed.push(raster);
  });
  const run = createRun({ session, plan, journal: journalOf(), clock, identity });
  await clock.run(run.start());
  expect(run.view.state, run.view.why).toBe("trying");
  await clock.advance(PAST_COUNTDOWN_MS);
  expect(run.view.state, run.view.why).toBe("put-back");
  // What cannot be read stands in no backup; everything else is as it was.
  expect(rig.device.working).toMatchObject(content.values);
  run.release();
  await clock.run(session.close());
  return { notAllowed };
}

test.each(demoDevices.map((device) => [device.name, device] as const))(
  "%s: applying each demo profile and letting it lapse puts out allowed rasters alone, and the old values come back",
  async (_name, device) => {
    let applied = 0;
    for (const profile of demoProfiles) {
      const document = profile.revisions.at(-1)?.document;
      const done = document && (await apply(device, document));
      if (!done) continue;
      applied += 1;
      expect(done.notAllowed, `${device.key} ${profile.key}`).toEqual([]);
    }
    // The demo has to show something on every device: a loop over nothing would prove nothing.
    expect(applied).toBeGreaterThan(0);
  },
);
