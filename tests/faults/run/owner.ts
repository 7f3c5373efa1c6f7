import type { RasterTiming } from "@/lib/timing/raster";
import { allowedRasters } from "@/lib/serial/plan/allowed-rasters";
import type { Run } from "@/lib/serial/run/create-run";
import { FINAL_RUN_STATES, type OwnerWord, type RunState } from "@/lib/serial/run/types";
import { brokenBy, brokenInAct, standsNow } from "./invariants";
import { ALIGN_ACTS, align, nothingNew } from "./alignment";
import { comeBack, seeToTheLine, type World } from "./world";

/** What the owner means to do, and what with a run that reached neither side. */
export type Intent = { readonly wish: "keep" | "put-back"; readonly recovery: "finish" | "put-back" };

/** Acts of one run, at most: a fault can send an owner round twice, never for ever. */
const MAX_ACTS = 24;

/** Somebody at the page who brings a run to an end, whatever happens, while everything that it promises is watched. */
export class Owner {
  readonly broken: string[] = [];
  private looked = false;
  private aligned = 0;
  private cycled = false;
  private watched: Run | null = null;
  private state: RunState = "ready";

  constructor(
    private readonly world: World,
    private readonly intent: Intent,
    private readonly aligns = false,
  ) {
    const { plan, device } = world;
    const allowed = allowedRasters({ screen: plan.input.screen, before: plan.rasterBefore, after: plan.rasterAfter });
    device.onRaster((raster: RasterTiming | null, cause) => {
      // A device that stores other values than it was given puts out what nobody asked for.
      if (cause !== "switch-on" && cause !== "started" && !world.deviceLied && !allowed(raster)) this.broken.push(`a raster that is not allowed is out (${cause})`);
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
    const before = standsNow(world);
    await world.clock.run(press());
    this.broken.push(...brokenInAct(world, before));
  }

  /** From `ready` to `trying`, before anything goes wrong. */
  async start(): Promise<void> {
    this.watch();
    await this.act("keep", () => this.world.run.start());
  }

  private async proceed(): Promise<void> {
    const { run, device, clock } = this.world;
    const { recovery, wish } = this.intent;
    const recover = () => {
      seeToTheLine(this.world);
      return recovery === "finish" ? this.act("keep", () => run.finish()) : this.act("back", () => run.putBack());
    };
    switch (run.view.state) {
      case "ready":
        return this.act("keep", () => run.start());
      case "trying":
        if (this.aligns && this.aligned < ALIGN_ACTS.length) {
          this.aligned += 1;
          return this.act(null, () => Promise.all((ALIGN_ACTS[this.aligned - 1] ?? []).map((target) => align(this.world, target))));
        }
        // Steps that never left may have left nothing to keep.
        if (this.aligns && wish === "keep" && nothingNew(this.world)) return this.act("back", () => run.putBack());
        if (wish === "keep" && !this.looked) {
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
        return recover();
      case "mixed":
        return recover();
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
