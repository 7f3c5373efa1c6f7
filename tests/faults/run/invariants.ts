import type { NativeValues } from "@/lib/serial/native";
import { rasterOfSlot, sameOutput } from "@/lib/serial/plan/output-raster";
import { factsFrom } from "@/lib/serial/run/run-facts";
import type { JournalEntry, RunState, RunView } from "@/lib/serial/run/types";
import { pickAligned, wasAskedFor } from "./alignment";
import { CHANGED, type World } from "./world";

export type Sides = { readonly old: NativeValues; readonly new: NativeValues };

/** With what was aligned, which is one of the values that were asked for (see `wasAskedFor`). */
export function sidesOf({ plan, isByHand, asked, run, backup }: World): Sides {
  const former = Object.fromEntries(plan.changes.map(({ key, was }) => [key, was]));
  const planned = isByHand ? former : Object.fromEntries(plan.changes.map(({ key, planned: value }) => [key, value]));
  if (asked.length === 0) return { old: former, new: planned };
  return { old: { ...former, ...pickAligned(backup.content.values) }, new: { ...planned, ...pickAligned(run.values) } };
}

/** The raster out is that of the slot that is on, as its values are: a question where timing takes effect on recall. */
function rasterInEffect({ device, driver }: World): boolean {
  if (driver.definition.timingTakesEffect !== "recall") return true;
  return sameOutput(device.rasterOut, rasterOfSlot(driver, new Map(Object.entries(device.working)), device.activeSlot));
}

/**
 * What entering a state promises of the device, checked on the device itself at that moment.
 *
 * Source: the run's executable model, invariants S1 to S8 (S3 and S4's ways out are checked on whole runs).
 */
export function brokenBy(world: World, before: RunState, view: RunView): readonly string[] {
  const { device, storedAtStart } = world;
  const found: string[] = [];
  const demand = (truth: boolean, sentence: string) => {
    if (!truth) found.push(sentence);
  };
  demand(view.link === "up" || view.why !== "" || before === view.state, "I6 the link is lost, and nothing says why");
  if (view.state === before) return found;
  demand(wasAskedFor(world), "what counts as new was neither planned nor asked for");
  const sides = sidesOf(world);
  const changedKeys = Object.keys(sides.new);
  const holds = (values: NativeValues, wanted: NativeValues) => changedKeys.every((key) => values[key] === wanted[key]);
  const commitSent = factsFrom(world.journals.browser).commitSent;
  const untouched = (values: NativeValues) => holds(values, sides.old) || holds(values, storedAtStart);
  if (view.state === "kept") {
    demand(holds(device.stored, sides.new), "S1 kept, but non-volatile memory is not all new");
    demand(!device.timerArmed, "S1 kept, but the device timer is armed");
    demand(!device.muted, "kept, but the output is muted");
    demand(world.word === "keep", "S8 kept, but the owner's last word was to put back");
  }
  if (view.state === "put-back") {
    demand(holds(device.working, sides.old), "S2 put-back, but working memory is not all old");
    demand(untouched(device.stored), `S2 put-back, but non-volatile memory is not all old (commit sent: ${String(commitSent)})`);
    demand(rasterInEffect(world), "S2 put-back, but the raster out is not the old one");
    demand(!device.timerArmed, "S2 put-back, but the device timer is armed");
    demand(!device.muted, "put-back, but the output is muted");
    demand(device.activeSlot === 1, "S5 put-back, but another slot is active");
  }
  if (view.state === "called-off") demand(device.counts.writes === Number(storedAtStart[CHANGED.other] !== sides.old[CHANGED.other]), "called off, but something was written");
  if (view.state === "mixed" || view.state === "unconfirmed") demand(view.why !== "", `I6 ${view.state}, and nothing says why`);
  if (view.state === "mixed" && !world.timerFired) {
    demand(view.standings.every(({ key, found: value }) => value === device.working[key]), "S4 mixed, with a wrong label");
  }
  if (view.state === "trying") {
    demand(holds(device.working, sides.new) && rasterInEffect(world), "S7 trying begins, but the device does not show all new");
    if (!view.onlyThisPagePutsBack) {
      demand(device.timerArmed ? world.armedOver !== null && untouched(world.armedOver) : untouched(device.working), "S6 trying, and the device alone would not go back to the old values");
    }
  }
  return found;
}

const isOnce = (entry: JournalEntry) => entry.kind === "request" && (entry.request === "recall" || entry.request === "commit");

/** How things stood when an act began. */
export type Before = { readonly left: number; readonly stored: Readonly<Record<string, number>>; readonly number: number };

const lastNumber = (entries: readonly JournalEntry[]) => entries.reduce((last, { number }) => Math.max(last, number), 0);

export function standsNow(world: World): Before {
  return { left: world.left.length, stored: world.device.counts.stored, number: lastNumber(world.journals.browser) };
}

/** S3: the same recall or commit in the same direction leaves once. */
function leftTwice(entries: readonly JournalEntry[]): readonly string[] {
  const found: string[] = [];
  const seen = new Map<string, number>();
  for (const entry of entries) {
    if (entry.kind !== "request" || !isOnce(entry)) continue;
    const purpose = `${entry.request} ${entry.slot ?? ""} ${entry.direction}`;
    const other = seen.get(purpose);
    if (other !== undefined && other !== entry.number) found.push(`S3 ${purpose} left twice in one act`);
    seen.set(purpose, entry.number);
  }
  return found;
}

/** I7, I8, S3: what left in one act of the owner. */
export function brokenInAct(world: World, before: Before): readonly string[] {
  const found = [...leftTwice(world.journals.browser.filter(({ number }) => number > before.number))];
  const left = world.left.slice(before.left);
  // One to keep and, where that went wrong in the same act, one to put back.
  const commits = left.filter((name) => name === "commit").length;
  if (commits > 2) found.push(`S3 commit left ${commits} times in one act`);
  const journalled = new Set(world.journals.browser.filter(isOnce).map(({ number }) => number)).size;
  if (world.left.length > journalled) found.push(`I7 ${world.left.length} recalls and commits left for ${journalled} in the journal`);
  for (const [key, count] of Object.entries(world.device.counts.stored)) {
    if (count - (before.stored[key] ?? 0) > 2) found.push(`I8 ${key} was stored more than once each way in one act`);
  }
  return found;
}
