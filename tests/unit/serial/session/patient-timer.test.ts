import { describe, expect, test } from "vitest";
import type { Clock } from "@/lib/serial/clock";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { afterPatiently } from "@/lib/serial/session/patient-timer";

/** A clock whose timers come late, as on a page that is held up: `lateMs` says by how much the n-th one is. */
function heldUp(lateMs: (n: number) => number) {
  const clock = createVirtualClock();
  let n = 0;
  const late: Clock = { nowMs: () => clock.nowMs(), wallMs: () => clock.wallMs(), after: (ms, fire) => clock.after(ms + lateMs(n++), fire) };
  return { clock, late };
}

async function firedAtMs(lateMs: (n: number) => number, ms: number): Promise<number> {
  const { clock, late } = heldUp(lateMs);
  let at = -1;
  afterPatiently(late, ms, () => { at = clock.nowMs(); });
  await clock.advance(100_000);
  return at;
}

describe("a deadline", () => {
  test("falls to the millisecond where no timer is late", async () => {
    expect(await Promise.all([1, 99, 100, 250, 600].map((ms) => firedAtMs(() => 0, ms)))).toEqual([1, 99, 100, 250, 600]);
  });

  test("does not count the time in which the page was held up", async () => {
    // The second slice of 600 ms comes 450 ms late: one slice more is waited after it.
    expect(await firedAtMs((n) => (n === 1 ? 450 : 0), 600)).toBe(600 + 450 + 100);
  });

  test("is judged later where the page was held up at its very end: what waits to be read has its turn", async () => {
    expect(await firedAtMs((n) => (n === 5 ? 400 : 0), 600)).toBeGreaterThan(1000);
  });

  test("comes all the same in a hidden tab, whose timers are a second apart (serial traps: 1 Hz alignment)", async () => {
    const at = await firedAtMs(() => 900, 600);
    expect(at).toBeGreaterThan(600);
    expect(at).toBeLessThan(15_000);
  });

  test("is taken back in any slice, and leaves no timer", async () => {
    const clock = createVirtualClock();
    let fired = false;
    const cancel = afterPatiently(clock, 600, () => { fired = true; });
    await clock.advance(250);
    cancel();
    expect(clock.pendingTimers()).toBe(0);
    await clock.advance(1000);
    expect(fired).toBe(false);
  });
});
