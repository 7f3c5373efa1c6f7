import type { RasterTiming } from "@/lib/timing/raster";
import { allowedRasters } from "@/lib/serial/plan/allowed-rasters";
import type { Run } from "@/lib/serial/run/create-run";
import { FINAL_RUN_STATES, type OwnerWord, type RunState } from "@/lib/serial/run/types";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { brokenBy } from "./invariants";
import { comeBack, createWorld, type World } from "./world";
import type { Fault } from "./fault-line";

/** What the owner means to do, and what with a run that reached neither side. */
export type Intent = { readonly wish: "keep" | "put-back"; readonly recovery: "finish" | "put-back" };

export type Case = {
  readonly definition: DriverDefinition;
  readonly intent: Intent;
  readonly faults: readonly Fault[];
  readonly powerOnSlot: 1 | 2;
  readonly dirty: boolean;
};

export type Explored = { readonly fired: number; readonly points: number; readonly end: RunState; readonly broken: readonly string[] };

/** Acts of one run, at most: a fault can send an owner round twice, never for ever. */
const MAX_ACTS = 24;

class Owner {
  readonly broken: string[] = [];
  private looked = false;
  private cycled = false;
  private watched: Run | null = null;
  private state: RunState = "ready";
  private leftBefore = 0;

  constructor(
    private readonly world: World,
    private readonly intent: Intent,
  ) {
    const { plan, device } = world;
    const allowed = allowedRasters({ screen: plan.input.screen, before: plan.rasterBefore, after: plan.rasterAfter });
    device.onRaster((raster: RasterTiming | null, cause) => {
      if (cause !== "switch-on" && cause !== "started" && !allowed(raster)) this.broken.push(`a raster that is not allowed is out (${cause})`);
    });
  }

  watch(): void {
    const { run } = this.world;
    if (this.watched === run) return;
    this.watched = run;
    this.state = run.view.state;
    run.onView((view) => {
      if (this.world.run !== run || !this.world.tabOpen) return;
      // The countdown speaks for the owner too.
      if (view.state === "putting-back" && this.state === "trying") this.world.word = "back";
      this.broken.push(...brokenBy(this.world, this.state, view));
      this.state = view.state;
    });
  }

  /** One act to rest, and what may leave but once in it. */
  async act(word: OwnerWord | null, press: () => PromiseLike<unknown>): Promise<void> {
    if (word !== null) this.world.word = word;
    const { world } = this;
    world.timerFired = false;
    this.leftBefore = world.left.length;
    await world.clock.run(press());
    const left = world.left.slice(this.leftBefore);
    const commits = left.filter((line) => line.startsWith("MEM:COMMIT")).length;
    // One to keep and, where that went wrong in the same act, one to put back.
    if (commits > 2) this.broken.push(`S3 commit left ${commits} times in one action`);
    const sent = world.entries.filter((entry) => entry.kind === "request" && entry.outcome === "leaving" && (entry.request === "recall" || entry.request === "commit"));
    if (world.left.length > sent.length) this.broken.push(`S3 ${world.left.length} recalls and commits left for ${sent.length} in the journal`);
    const perPurpose = new Map<string, number>();
    for (const entry of sent.slice(this.leftBefore)) {
      if (entry.kind !== "request") continue;
      const purpose = `${entry.request} ${entry.slot ?? ""} ${entry.direction}`;
      perPurpose.set(purpose, (perPurpose.get(purpose) ?? 0) + 1);
    }
    for (const [purpose, count] of perPurpose) if (count > 1) this.broken.push(`S3 ${purpose} left ${count} times in one action`);
  }

  private async proceed(): Promise<void> {
    const { run, device, clock } = this.world;
    const { recovery, wish } = this.intent;
    switch (run.view.state) {
      case "ready":
        return this.act("keep", () => run.start());
      case "trying":
        if (!this.looked) {
          this.looked = true;
          return this.act(null, () => run.look(2));
        }
        return wish === "keep" ? this.act("keep", () => run.keep()) : this.act("back", () => run.putBack());
      case "unconfirmed":
        if (!this.cycled && device.driver.definition.status.committed === undefined) {
          this.cycled = true;
          device.powerCycle();
          await clock.advance(2_000);
          const counts = device.driver.definition.status.bootCount !== undefined;
          return this.act(null, () => (counts ? run.readAgain() : run.stateCycled()));
        }
        this.cycled = false;
        return recovery === "finish" ? this.act("keep", () => run.finish()) : this.act("back", () => run.putBack());
      case "mixed":
        return recovery === "finish" ? this.act("keep", () => run.finish()) : this.act("back", () => run.putBack());
      default:
        this.broken.push(`S4 the run came to rest in ${run.view.state}`);
    }
  }

  async live(): Promise<RunState> {
    const { world } = this;
    for (let acts = 0; acts < MAX_ACTS && this.broken.length === 0; acts += 1) {
      this.watch();
      const { state, link } = world.run.view;
      if (FINAL_RUN_STATES.includes(state) && world.tabOpen) return state;
      if (!world.tabOpen || link === "lost") {
        world.timerFired = false;
        await comeBack(world);
        this.watch();
      } else await this.proceed();
    }
    if (this.broken.length === 0) this.broken.push("S4 the run found no end");
    return world.run.view.state;
  }
}

/** Lives one run through its faults and says what it broke. */
export async function explore(one: Case): Promise<Explored> {
  const world = await createWorld(one);
  const owner = new Owner(world, one.intent);
  const end = await owner.live();
  world.run.release();
  await world.clock.run(world.session.close());
  return { fired: world.line.fired, points: world.line.points, end, broken: owner.broken };
}
