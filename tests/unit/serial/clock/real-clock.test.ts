import { describe, expect, test } from "vitest";
import { createRealClock } from "@/lib/serial/clock/real-clock";

describe("real clock", () => {
  test("never fires before the moment by its own now", async () => {
    const clock = createRealClock();
    for (let turn = 0; turn < 20; turn += 1) {
      const dueMs = clock.nowMs() + 1.7;
      await new Promise<void>((resolve) => clock.after(1.7, resolve));
      expect(clock.nowMs()).toBeGreaterThanOrEqual(dueMs);
    }
  });

  test("fires no timer that was taken back", async () => {
    const clock = createRealClock();
    let fired = false;
    clock.after(1, () => (fired = true))();
    await new Promise<void>((resolve) => clock.after(5, resolve));
    expect(fired).toBe(false);
  });

  test("keeps a delay longer than the platform's timers hold", async () => {
    const clock = createRealClock();
    let fired = false;
    const takeBack = clock.after(2 ** 31 + 5, () => (fired = true));
    await new Promise<void>((resolve) => clock.after(5, resolve));
    takeBack();
    expect(fired).toBe(false);
  });
});
