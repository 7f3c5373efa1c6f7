import { takeBackup } from "@/lib/serial/backup/take-backup";
import type { RunState } from "@/lib/serial/run/types";
import type { WireDirection } from "@/lib/serial/simulator/wire-fault";
import { Owner } from "./owner";
import { beginTroubles, comeBack, createWorld, endTroubles, type World } from "./world";
import type { Case } from "./case-id";

/** How many places for a trouble a case had: requests that count, and bytes of each direction. */
export type Reached = Readonly<Record<"requests" | WireDirection, number>>;

export type Explored = {
  /** How many of the case's troubles have struck. */
  readonly struck: number;
  readonly end: RunState | "backed-up" | "not-backed-up";
  readonly broken: readonly string[];
  readonly reached: Reached;
};

/** Longer than any timer of a page that is closed, or of a device that starts. */
const AFTERWARDS_MS = 3_000;

/** A port whose streams nobody holds can be opened and closed again. @returns what it said otherwise */
async function openAgain({ plug, driver }: World): Promise<string | null> {
  const port = plug.replug();
  try {
    await port.open(driver.definition.transport);
    await port.close();
    return null;
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
}

/** I4 and I5: the line works or counts as lost, and nothing is left behind. */
export async function aftermath(world: World): Promise<readonly string[]> {
  const { clock, device } = world;
  const broken: string[] = [];
  endTroubles(world);
  await clock.advance(AFTERWARDS_MS);
  if (world.session.state.name === "ready") {
    const slot = await clock.run(world.session.activeSlot());
    if (!slot.ok || slot.value !== device.activeSlot) broken.push(`I4 the line does not work afterwards: ${slot.ok ? `slot ${slot.value}` : slot.error.message}`);
  } else if (world.session.state.name !== "lost") broken.push(`I4 the session is ${world.session.state.name}`);
  world.run.release();
  await clock.run(world.session.close());
  const again = await clock.run(openAgain(world));
  if (again !== null) broken.push(`I4 the port does not open again: ${again}`);
  await clock.advance(AFTERWARDS_MS);
  if (clock.pendingTimers() > 0) broken.push(`I5 ${clock.pendingTimers()} timers are left`);
  return broken;
}

const reachedIn = ({ line, bytes }: World): Reached => ({ requests: line.points, ...bytes.counts });

/** A second tab is told clearly that the port is taken, and gets nothing of the device. */
function brokenBySecondTab({ secondTabs }: World): readonly string[] {
  return secondTabs.flatMap((opened) => (opened.ok || !["open-refused", "already-open"].includes(opened.error.code) ? ["a second tab was not told that the port is taken"] : []));
}

async function backUp(world: World): Promise<Explored> {
  const { clock, driver, device } = world;
  const slotBefore = device.activeSlot;
  beginTroubles(world);
  const taken = await clock.run(takeBackup(world.session, driver));
  const broken: string[] = [];
  const held = Object.fromEntries(Object.entries(device.working).filter(([key]) => driver.byKey.get(key)?.readable));
  const same = (values: object) => JSON.stringify(Object.entries(values).sort()) === JSON.stringify(Object.entries(held).sort());
  if (taken.ok && !same(taken.value.content.values)) broken.push("I3 a backup holds what the device does not");
  // A restart after the last reply may have put another slot on since.
  if (taken.ok && ![slotBefore, device.activeSlot].includes(taken.value.activeSlot)) broken.push("I3 a backup names another slot");
  if (!taken.ok && taken.error.message === "") broken.push("I6 a backup failed, and nothing says why");
  if (!taken.ok && world.noted.length === 0) broken.push("I6 a backup failed, and the wire log has no word of it");
  if (device.counts.writes + device.counts.recalls + device.counts.commits > 0) broken.push("a backup has changed the device");
  const struck = world.bytes.struck + world.line.fired;
  const reached = reachedIn(world);
  if (world.session.state.name === "lost") await comeBack(world);
  broken.push(...(await aftermath(world)));
  return { struck, end: taken.ok ? "backed-up" : "not-backed-up", broken, reached };
}

/** Lives one case through its troubles and says what it broke. Whatever throws is a thing broken, I1 among them. */
export async function explore(one: Case): Promise<Explored> {
  const world = await createWorld(one);
  if (one.scenario === "backup") return backUp(world);
  const owner = new Owner(world, one.intent, one.scenario === "align" || one.scenario === "by-hand");
  if (one.scenario === "put-back" || one.scenario === "align") await owner.start();
  beginTroubles(world);
  const end = await owner.live();
  const struck = world.line.fired + world.bytes.struck;
  const reached = reachedIn(world);
  const broken = [...owner.broken, ...brokenBySecondTab(world), ...(await aftermath(world))];
  return { struck, end, broken, reached };
}
