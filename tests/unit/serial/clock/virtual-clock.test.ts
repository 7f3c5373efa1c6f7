import { describe, expect, test } from "vitest";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";

describe("virtual clock", () => {
  test("fires timers by moment, and those of one moment in the order they were set", async () => {
    const clock = createVirtualClock();
    const fired: string[] = [];
    clock.after(5, () => fired.push(`b ${clock.nowMs()}`));
    clock.after(1, () => fired.push(`a ${clock.nowMs()}`));
    clock.after(5, () => fired.push(`c ${clock.nowMs()}`));
    await clock.advance(10);
    expect(fired).toEqual(["a 1", "b 5", "c 5"]);
    expect(clock.nowMs()).toBe(10);
    expect(clock.pendingTimers()).toBe(0);
  });

  test("fires no timer that was taken back", async () => {
    const clock = createVirtualClock();
    let fired = false;
    const takeBack = clock.after(1, () => (fired = true));
    takeBack();
    takeBack();
    await clock.advance(10);
    expect(fired).toBe(false);
    expect(clock.pendingTimers()).toBe(0);
  });

  test("passes no more time than a promise needs, over timers that code sets as it goes", async () => {
    const clock = createVirtualClock();
    const wait = (ms: number) => new Promise<void>((resolve) => clock.after(ms, resolve));
    clock.after(1000, () => undefined);
    const result = await clock.run(
      (async () => {
        for (let step = 0; step < 3; step += 1) await wait(20);
        return "done";
      })(),
    );
    expect(result).toBe("done");
    expect(clock.nowMs()).toBe(60);
    expect(clock.pendingTimers()).toBe(1);
  });

  test("lets web streams move all they can before time passes", async () => {
    const clock = createVirtualClock();
    const through = new TransformStream<string, string>();
    const writer = through.writable.getWriter();
    const reader = through.readable.pipeThrough(new TransformStream()).pipeThrough(new TransformStream()).getReader();
    clock.after(7, () => void writer.write("seven"));
    const read = await clock.run(reader.read());
    expect(read).toEqual({ value: "seven", done: false });
    expect(clock.nowMs()).toBe(7);
  });

  test("passes a rejection on", async () => {
    const clock = createVirtualClock();
    const failing = new Promise((_, reject) => clock.after(3, () => reject(new Error("no reply"))));
    await expect(clock.run(failing)).rejects.toThrow("no reply");
  });

  test("says so when nothing is left that could settle the promise", async () => {
    const clock = createVirtualClock({ startMs: 4 });
    await expect(clock.run(new Promise(() => undefined))).rejects.toThrow(
      "Nothing can settle the promise: at 4.000 ms no timer is set.",
    );
  });

  test("stops at the limit and names what is pending", async () => {
    const clock = createVirtualClock();
    const again = (): void => void clock.after(50, again);
    again();
    await expect(clock.run(new Promise(() => undefined), { limitMs: 120 })).rejects.toThrow(
      "open after 120 virtual ms: at 100.000 ms 1 timers are set, the next at +50.000 ms",
    );
  });

  test("waits for work outside the clock before it calls a deadlock", async () => {
    const clock = createVirtualClock();
    const digest = await clock.run(crypto.subtle.digest("SHA-256", new Uint8Array(3)));
    expect(digest.byteLength).toBe(32);
    expect(clock.nowMs()).toBe(0);
  });

  test("moves the wall clock with the monotonic one", async () => {
    const clock = createVirtualClock({ startMs: 100, wallStartMs: 1_000_000 });
    await clock.advance(250);
    expect(clock.wallMs()).toBe(1_000_250);
    expect(clock.nowMs()).toBe(350);
  });

  test("refuses two runs at once", async () => {
    const clock = createVirtualClock();
    const first = clock.advance(10);
    await expect(clock.run(Promise.resolve())).rejects.toThrow("runs already");
    await first;
  });
});
