import { describe, expect, test } from "vitest";
import { createWireView } from "@/components/bench/wire-view";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { createWireLog, hexOf } from "@/lib/serial/wire-log";

const bytesOf = (text: string) => new TextEncoder().encode(text);

function scene(maxEntries?: number) {
  const clock = createVirtualClock();
  const log = createWireLog({ clock, maxEntries });
  const view = createWireView(log, clock);
  const stop = view.follow();
  let draws = 0;
  view.store.subscribe(() => { draws += 1; });
  const say = (text: string) => log.out(bytesOf(text));
  const texts = () => view.store.getState().entries.map((entry) => entry.text);
  return { clock, log, view, stop, say, texts, draws: () => draws };
}

describe("the view of the wire log", () => {
  test("is drawn at most once in 120 ms, however many bytes flow", async () => {
    const { clock, say, view, draws } = scene();
    for (let n = 0; n < 5000; n += 1) say(`HPOS ${n}`);
    expect(draws()).toBe(0);
    await clock.advance(120);
    expect(draws()).toBe(1);
    expect(view.store.getState().entries).toHaveLength(5000);
  });

  test("holds no more than the ring, and looks at new entries alone", async () => {
    const { clock, say, texts } = scene(100);
    for (let n = 0; n < 90; n += 1) say(`A ${n}`);
    await clock.advance(120);
    for (let n = 0; n < 60; n += 1) say(`B ${n}`);
    await clock.advance(120);
    expect(texts()).toHaveLength(100);
    expect(texts().filter((text) => text.startsWith("A"))).toHaveLength(40);
    for (let n = 0; n < 1000; n += 1) say(`C ${n}`);
    await clock.advance(120);
    expect(texts()).toEqual(Array.from({ length: 100 }, (_, n) => `C ${900 + n}`));
  });

  test("filters by text and by hex, what stands and what comes", async () => {
    const { clock, say, view, texts } = scene();
    say("HPOS 3"); say("VPOS 4");
    view.setFilter("hpos");
    expect(texts()).toEqual(["HPOS 3"]);
    say("VPOS 5"); say("HPOS 6");
    await clock.advance(120);
    expect(texts()).toEqual(["HPOS 3", "HPOS 6"]);
    view.setFilter(hexOf(bytesOf("VPOS 5")));
    expect(texts()).toEqual(["VPOS 5"]);
  });

  test("filters by what is said of a line, as it is drawn", () => {
    const { log, view, texts } = scene();
    log.in(bytesOf("HPOS=3"));
    log.in(bytesOf("HP_S=3"), { note: "noise" });
    view.setFilter("(noise)");
    expect(texts()).toEqual(["HP_S=3"]);
  });

  test("stands still while paused, says how many are newer, and goes on with all of them", async () => {
    const { clock, say, view, texts } = scene();
    say("one");
    await clock.advance(120);
    view.setPaused(true);
    say("two"); say("three");
    await clock.advance(120);
    expect(texts()).toEqual(["one"]);
    expect(view.store.getState()).toMatchObject({ newer: 2, total: 3 });
    view.setFilter("t");
    expect(texts()).toEqual([]);
    view.setFilter("");
    view.setPaused(false);
    expect(texts()).toEqual(["one", "two", "three"]);
  });

  test("goes from hit to hit, round and round, and is held still for it", async () => {
    const { clock, say, view } = scene();
    say("a 1"); say("b 1"); say("a 2");
    await clock.advance(120);
    view.setSearch("a ");
    expect(view.store.getState().matches).toEqual([0, 2]);
    const sights = [1, 1, 1, -1].map((step) => {
      view.goToHit(step as 1 | -1);
      return view.store.getState().sight?.index;
    });
    expect(sights).toEqual([0, 2, 0, 2]);
    expect(view.store.getState().isPaused).toBe(true);
  });

  test("opens on the bytes of a stretch of time, filtered or not", async () => {
    const { clock, say, view } = scene();
    say("before");
    await clock.advance(1000);
    const fromMs = clock.wallMs();
    say("during");
    await clock.advance(1000);
    say("after");
    view.setFilter("before");
    view.showStretch({ fromMs, toMs: fromMs + 10 });
    expect(view.store.getState()).toMatchObject({ isOpen: true, isPaused: true, filter: "", sight: { index: 1 } });
    // A search goes on from there, and what was marked before is marked no more.
    view.setSearch("before");
    view.goToHit(1);
    expect(view.store.getState()).toMatchObject({ stretch: null, sight: { index: 0 } });
  });

  test("leaves no timer and no listener when nobody follows", () => {
    const { clock, say, stop } = scene();
    say("one");
    stop();
    say("two");
    expect(clock.pendingTimers()).toBe(0);
  });
});
