import { documentFromNative, nativeFromDocument } from "@/lib/serial/backup/document";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { NativeValue, NativeValues } from "@/lib/serial/native";
import { pictureFits } from "@/lib/serial/plan/picture-fits";
import { createWritesFor, emptySlots, filledSlots } from "./bench-writes";
import type { Section } from "./section";
import { openBench, type Surroundings, type TestBench } from "./test-bench";
import { evenly, planValues, type ValueCase } from "./values-to-try";

const shown = (value: NativeValue | undefined) => (typeof value === "string" ? `“${value}”` : String(value));

/** Opens a bench and hands it on; that it opens and ends cleanly are cases too. */
async function onBench(section: Section, around: Surroundings, values: NativeValues, use: (bench: TestBench) => Promise<void>): Promise<void> {
  const bench = await openBench(around, { values });
  section.judge("a session opens", typeof bench === "string" ? bench : null);
  if (typeof bench === "string") return;
  await use(bench);
  await section.attempt("a session ends and leaves nothing behind", () => bench.end());
}

function firstDifference(values: NativeValues, device: NativeValues, keys: readonly string[]): string | null {
  const key = keys.find((one) => values[one] !== device[one]);
  return key === undefined ? null : `${key} was read as ${shown(values[key])}, and the device holds ${shown(device[key])}.`;
}

/** Everything is read once, as the device holds it, and comes back from the document made of it. */
export function judgeReading(around: Surroundings, section: Section): Promise<void> {
  const { driver } = around;
  const readable = driver.settings.filter((setting) => setting.readable).map(({ key }) => key);
  return onBench(section, around, {}, async ({ session, device, run }) => {
    const read = await run(session.readWhole());
    section.judge("everything is read", read.ok ? null : read.error.message);
    if (!read.ok) return;
    const { values, activeSlot } = read.value;
    section.judge("what is read is what the device holds", firstDifference(values, device.working, readable));
    section.judge("the slot that is on is read", activeSlot === device.activeSlot ? null : `Slot ${activeSlot} was read, and slot ${device.activeSlot} is on.`);
    const { writes, recalls, commits, refusals } = device.counts;
    section.judge("reading changes nothing", writes + recalls + commits === 0 ? null : "The device was written to.");
    section.judge("the device refuses no query", refusals === 0 ? null : `${refusals} queries were refused.`);
    await section.attempt("the document made of it leads back to the same values", async () =>
      firstDifference(nativeFromDocument(driver, documentFromNative(driver, values), values), values, readable));
    if (driver.definition.status.arriving) {
      const arriving = await run(session.arriving());
      section.judge("what arrives is read", !arriving.ok ? arriving.error.message : arriving.value.format?.activeLines === device.source?.activeLines ? null : "Another format was read.");
    }
  });
}

/** The device may refuse what would push a picture out of its raster, and nothing else that is in range. */
function isConflict(driver: CompiledDriver, working: NativeValues, { setting, value }: ValueCase): boolean {
  if (driver.definition.output.outsideRaster !== "refuses") return false;
  const before = new Map(Object.entries(working));
  const after = new Map(before).set(setting.key, value);
  const { first, count } = driver.definition.slots;
  for (let slot = first; slot < first + count; slot += 1) if (pictureFits(driver, before, slot) && !pictureFits(driver, after, slot)) return true;
  return false;
}

async function tryValue({ driver, session, device, run }: TestBench, writesFor: ReturnType<typeof createWritesFor>, one: ValueCase): Promise<string | null> {
  const { setting, value, valid } = one;
  const { key } = setting;
  const before = device.working;
  const written = await run(session.write(writesFor(before, key, value)));
  const acknowledged = written.ok && written.value.outcome === "acknowledged";
  const held = device.working[key];
  if (acknowledged && !valid) return `The device took ${shown(value)}, which is out of its range.`;
  if (acknowledged && held !== value) return `It was acknowledged, and the device holds ${shown(held)}.`;
  if (!acknowledged && held !== before[key]) return `It was not acknowledged, and the device holds ${shown(held)} instead of ${shown(before[key])}.`;
  if (!acknowledged && valid && !isConflict(driver, before, one)) return written.ok ? `Nobody knows whether it was written: ${"message" in written.value ? written.value.message : ""}` : written.error.message;
  if (!setting.readable) return null;
  const back = await run(session.read([key]));
  if (!back.ok) return `It cannot be read back: ${back.error.message}`;
  return back.value[key] === held ? null : `It reads back as ${shown(back.value[key])}, and the device holds ${shown(held)}.`;
}

/** Every setting at its least, its greatest, one step, between steps and beyond; every choice; every name's length and characters. */
export function judgeSettings(around: Surroundings, section: Section): Promise<void> {
  const { driver, bounds } = around;
  const { cases, leftOut, settings } = planValues(driver, bounds.values);
  const writesFor = createWritesFor(driver);
  if (leftOut > 0) section.note(`Of ${settings} settings ${leftOut} were left out: slots and modes were thinned out evenly.`);
  return onBench(section, around, emptySlots(driver), async (bench) => {
    for (const one of cases) {
      await section.attempt(`${one.setting.key}, ${one.what}: ${shown(one.value)}`, () => tryValue(bench, writesFor, one));
      if (bench.session.state.name !== "ready") return section.judge(one.setting.key, "The session was lost.");
    }
  });
}

async function tryRecall({ driver, session, device, run }: TestBench, slot: number): Promise<string | null> {
  const { recalls } = device.counts;
  const fits = driver.definition.output.outsideRaster === "cuts" || pictureFits(driver, new Map(Object.entries(device.working)), slot);
  const result = await run(session.recall(slot));
  const acknowledged = result.ok && result.value.outcome === "acknowledged";
  if (!acknowledged) return fits ? (result.ok ? "Nobody knows whether it was made active." : result.error.message) : null;
  const active = await run(session.activeSlot());
  if (!active.ok) return active.error.message;
  if (active.value !== slot || device.activeSlot !== slot) return `Slot ${active.value} is read as active, and slot ${device.activeSlot} is on.`;
  return device.counts.recalls === recalls + 1 ? null : `It was made active ${device.counts.recalls - recalls} times.`;
}

async function tryWrongRecall({ session, device, run }: TestBench, slot: number): Promise<string | null> {
  const { activeSlot } = device;
  const result = await run(session.recall(slot));
  if (result.ok && result.value.outcome === "acknowledged") return "The device says that it made it active.";
  return device.activeSlot === activeSlot ? null : `Slot ${device.activeSlot} is on.`;
}

/** Every slot is made active once and read back; one beyond the last, and an empty one, are refused. */
export async function judgeSlots(around: Surroundings, section: Section): Promise<void> {
  const { driver, bounds } = around;
  const { slots, actions } = driver.definition;
  if (!actions.recall) return section.note("The driver has no order that makes a slot active.");
  const numbers = Array.from({ length: slots.count }, (_, index) => slots.first + index);
  const tried = evenly(numbers, bounds.slots);
  if (tried.length < numbers.length) section.note(`Of ${numbers.length} slots ${tried.length} were tried.`);
  await onBench(section, around, filledSlots(driver), async (bench) => {
    for (const slot of tried) await section.attempt(`slot ${slot}`, () => tryRecall(bench, slot));
    // One byte holds 255 at most: past that the wire would say another slot.
    if (slots.first + slots.count <= 255) await section.attempt(`slot ${slots.first + slots.count}, beyond the last`, () => tryWrongRecall(bench, slots.first + slots.count));
  });
  if (slots.emptyMode === undefined) return;
  await onBench(section, around, emptySlots(driver), async (bench) => {
    const empty = slots.first + slots.count - 1;
    await section.attempt(`slot ${empty}, empty`, () => tryWrongRecall(bench, empty));
  });
}
