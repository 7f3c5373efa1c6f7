import { describe, expect, test } from "vitest";
import type { Clock } from "@/lib/serial/clock";
import { createTimeline } from "@/lib/serial/clock/timeline";
import { createVirtualClock, type VirtualClock } from "@/lib/serial/clock/virtual-clock";

/** A clock that keeps the time and fires only at whole ticks, the next one at the soonest, as a browser's nested timers do. */
function coarse(clock: Clock, tickMs: number): Clock {
  return {
    nowMs: () => clock.nowMs(),
    wallMs: () => clock.wallMs(),
    after(ms, fire) {
      const nowMs = clock.nowMs();
      const tick = Math.max(Math.ceil((nowMs + ms) / tickMs), Math.floor(nowMs / tickMs) + 1);
      return clock.after(tick * tickMs - nowMs, fire);
    },
  };
}

type Said = { readonly name: string; readonly ownMs: number; readonly realMs: number };

/** A timeline over a coarse clock, and what is said on it. */
function overCoarse(tickMs = 4): { clock: VirtualClock; timeline: Clock; said: Said[]; say: (name: string) => void } {
  const clock = createVirtualClock();
  const timeline = createTimeline(coarse(clock, tickMs));
  const said: Said[] = [];
  return { clock, timeline, said, say: (name) => said.push({ name, ownMs: timeline.nowMs(), realMs: clock.nowMs() }) };
}

describe("timeline", () => {
  test("a chain of stages keeps its pace over a coarse clock, and no stage comes before its moment", async () => {
    const { clock, timeline, said, say } = overCoarse();
    const stage = (left: number): void => {
      say("stage");
      if (left > 1) timeline.after(2, () => stage(left - 1));
    };
    timeline.after(2, () => stage(50));
    await clock.advance(1000);
    expect(said.map(({ ownMs }) => ownMs)).toEqual(Array.from({ length: 50 }, (_, index) => (index + 1) * 2));
    expect(said.at(-1)?.realMs).toBe(100);
    for (const { ownMs, realMs } of said) {
      expect(realMs).toBeGreaterThanOrEqual(ownMs);
      expect(realMs - ownMs).toBeLessThan(4);
    }
  });

  test("what is overdue happens by moment, then by when it was set, with what it leads to in its place", async () => {
    const { clock, timeline, said, say } = overCoarse(100);
    timeline.after(30, () => say("c"));
    timeline.after(10, () => {
      say("a");
      timeline.after(20, () => say("d"));
      timeline.after(0, () => say("a, at once"));
      timeline.after(5, () => say("b"));
    });
    timeline.after(10, () => say("a too"));
    await clock.advance(100);
    expect(said.map(({ name, ownMs }) => `${name} ${ownMs}`)).toEqual(["a 10", "a too 10", "a, at once 10", "b 15", "c 30", "d 30"]);
    expect(said.every(({ realMs }) => realMs === 100)).toBe(true);
  });

  test("what comes from outside enters at the clock's time", async () => {
    const { clock, timeline, said, say } = overCoarse(10);
    timeline.after(3, () => say("late"));
    await clock.advance(7);
    expect(timeline.nowMs()).toBe(7);
    timeline.after(1, () => say("entered"));
    await clock.advance(10);
    expect(said).toEqual([
      { name: "late", ownMs: 3, realMs: 10 },
      { name: "entered", ownMs: 8, realMs: 10 },
    ]);
    expect(timeline.nowMs()).toBe(17);
  });

  test("the wall clock says an event's own moment", async () => {
    const clock = createVirtualClock({ wallStartMs: 1_000_000 });
    const timeline = createTimeline(coarse(clock, 100));
    let atMs = 0;
    timeline.after(30, () => (atMs = timeline.wallMs()));
    await clock.advance(250);
    expect(atMs).toBe(1_000_030);
    expect(timeline.wallMs()).toBe(1_000_250);
  });

  test("fires nothing that was taken back, before the turn or in it", async () => {
    const { clock, timeline, said, say } = overCoarse(100);
    timeline.after(5, () => say("taken back"))();
    const takeBack = timeline.after(20, () => say("taken back by a"));
    timeline.after(10, () => {
      say("a");
      takeBack();
      timeline.after(1, () => say("taken back as it was set"))();
    });
    await clock.advance(200);
    takeBack();
    expect(said.map(({ name }) => name)).toEqual(["a"]);
    expect(clock.pendingTimers()).toBe(0);
  });

  test("an event that throws keeps the others from nothing", async () => {
    const { clock, timeline, said, say } = overCoarse(100);
    timeline.after(10, () => {
      timeline.after(1, () => say("led to"));
      throw new Error("went wrong");
    });
    timeline.after(20, () => say("b"));
    await expect(clock.advance(100)).rejects.toThrow("went wrong");
    await clock.advance(200);
    expect(said.map(({ name, ownMs }) => `${name} ${ownMs}`)).toEqual(["led to 11", "b 20"]);
    expect(clock.pendingTimers()).toBe(0);
  });

  test("over a clock that is never late it is that clock: same moments, same order among timers of both, a turn each", async () => {
    const play = async (make: (clock: Clock) => Clock): Promise<string[]> => {
      const clock = createVirtualClock({ startMs: 0.3 });
      const timeline = make(clock);
      const heard: string[] = [];
      const say = (name: string): void => {
        heard.push(`${name} ${clock.nowMs()} ${timeline.nowMs()}`);
        void Promise.resolve().then(() => heard.push(`after ${name}`));
      };
      for (const [index, ms] of [0.7, 0.1, 0.2, 0.1, 0, -1].entries()) {
        (index % 2 === 0 ? timeline : clock).after(ms, () => {
          say(`first ${index}`);
          timeline.after(0.1, () => say(`own ${index}`));
          clock.after(0.1, () => say(`other ${index}`));
          timeline.after(0, () => say(`own ${index} at once`));
          timeline.after(1e9 / 3, () => say(`own ${index} far`));
          clock.after(1e9 / 3, () => say(`other ${index} far`));
        });
      }
      await clock.advance(1e9);
      return heard;
    };
    expect(await play(createTimeline)).toEqual(await play((clock) => clock));
  });
});
