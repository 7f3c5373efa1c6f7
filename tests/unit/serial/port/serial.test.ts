import { describe, expect } from "vitest";
import type { SerialPortLike } from "@/lib/serial/port";
import { benchTest, refusesWith } from "./bench-test";

type Targeted = SerialPortLike & EventTarget;

// Source: WICG/serial, "Serial interface"; DOM Standard, "dispatch"; the W3C test suite serial/serial_*, serialPort_events, _getInfo.
describe("getPorts", () => {
  benchTest("lists the granted adapters, each as the same object while it is there", async ({ bench, serial }) => {
    expect(await serial.getPorts()).toEqual([]);
    bench.attach();
    bench.attach();
    const [first, second] = await serial.getPorts();
    expect(first).toBeInstanceOf(bench.SerialPort);
    expect(first).not.toBe(second);
    expect((await serial.getPorts())[0]).toBe(first);
    expect(first?.constructor.name).toBe("SerialPort");
    expect(serial.constructor.name).toBe("Serial");
    expect(serial).toBeInstanceOf(bench.Serial);
    expect(serial).toBeInstanceOf(EventTarget);
  });

  benchTest("tells the vendor and product that are known, and no more", async ({ bench, serial }) => {
    bench.attach({ usbVendorId: 0x1209, usbProductId: 7 });
    bench.attach({ usbVendorId: 0x1209 });
    bench.attach();
    expect((await serial.getPorts()).map((port) => port.getInfo())).toEqual([
      { usbVendorId: 0x1209, usbProductId: 7 },
      { usbVendorId: 0x1209 },
      {},
    ]);
  });

  benchTest("lists nothing after a reset, which tells nobody", async ({ bench, serial }) => {
    const seen: string[] = [];
    serial.addEventListener("connect", (event) => seen.push(event.type));
    serial.addEventListener("disconnect", (event) => seen.push(event.type));
    bench.attach();
    bench.reset();
    expect(await serial.getPorts()).toEqual([]);
    expect(seen).toEqual([]);
  });
});

describe("requestPort", () => {
  benchTest("needs a user's gesture before it looks at anything else", async ({ serial }) => {
    await refusesWith("SecurityError", serial.requestPort());
    // Seen in Chromium 156: also where the filters are wrong.
    await refusesWith("SecurityError", serial.requestPort({ filters: [{}] }));
  });

  benchTest("is NotFoundError when the user picks nothing", async ({ bench, serial }) => {
    bench.userGesture();
    await refusesWith("NotFoundError", serial.requestPort());
    bench.choose(bench.attach());
    bench.choose(null);
    await refusesWith("NotFoundError", serial.requestPort());
  });

  benchTest("gives the picked port, the same object each time and as getPorts does", async ({ bench, serial }) => {
    bench.userGesture();
    bench.choose(bench.attach());
    const port = await serial.requestPort({ filters: [] });
    expect(await serial.requestPort()).toBe(port);
    expect(await serial.getPorts()).toEqual([port]);
  });

  benchTest("refuses an empty filter, and a product without its vendor", async ({ bench, serial }) => {
    bench.userGesture();
    bench.choose(bench.attach({ usbVendorId: 1, usbProductId: 2 }));
    await expect(serial.requestPort({ filters: [{}] })).rejects.toThrow(TypeError);
    await expect(serial.requestPort({ filters: [{ usbProductId: 2 }] })).rejects.toThrow(TypeError);
  });

  benchTest("lets the user pick only what a filter lets through", async ({ bench, serial }) => {
    bench.userGesture();
    bench.choose(bench.attach({ usbVendorId: 1, usbProductId: 2 }));
    await serial.requestPort({ filters: [{ usbVendorId: 9 }, { usbVendorId: 1 }] });
    await refusesWith("NotFoundError", serial.requestPort({ filters: [{ usbVendorId: 1, usbProductId: 3 }] }));
  });

  benchTest("has no gesture left after a reset", async ({ bench, serial }) => {
    bench.userGesture();
    bench.reset();
    await refusesWith("SecurityError", serial.requestPort());
  });
});

describe("connect and disconnect", () => {
  benchTest(
    "fire at the port and bubble to serial, after the call that caused them",
    async ({ bench, serial, clock }) => {
      const seen: [string, unknown][] = [];
      serial.addEventListener("connect", (event) => seen.push([event.type, event.target]));
      serial.addEventListener("disconnect", (event) => seen.push([event.type, event.target]));
      const far = bench.attach();
      expect(seen).toEqual([]);
      await new Promise<void>((resolve) => clock.after(1, resolve));
      const [port] = await serial.getPorts();
      const atPort: string[] = [];
      port?.addEventListener("disconnect", (event) => atPort.push(event.type));
      expect(port?.connected).toBe(true);
      far.detach();
      expect(await serial.getPorts()).toEqual([]);
      await new Promise<void>((resolve) => clock.after(1, resolve));
      expect(seen).toEqual([
        ["connect", port],
        ["disconnect", port],
      ]);
      expect(atPort).toEqual(["disconnect"]);
      expect(port?.connected).toBe(false);
    },
  );

  benchTest("of a wireless link move only `connected`: the port stays listed", async ({ bench, serial, clock }) => {
    const far = bench.attach({}, { connected: false });
    const [port] = await serial.getPorts();
    const seen: string[] = [];
    (port as Targeted & { onconnect: unknown; ondisconnect: unknown }).onconnect = () =>
      seen.push(`on ${port?.connected}`);
    (port as Targeted & { onconnect: unknown; ondisconnect: unknown }).ondisconnect = () =>
      seen.push(`off ${port?.connected}`);
    expect(port?.connected).toBe(false);
    far.setConnected(true);
    await new Promise<void>((resolve) => clock.after(1, resolve));
    far.setConnected(false);
    await new Promise<void>((resolve) => clock.after(1, resolve));
    expect(seen).toEqual(["on true", "off false"]);
    expect(await serial.getPorts()).toEqual([port]);
  });

  benchTest("of a replug make a new port object, and the old one does not open", async ({ bench, plug, serial }) => {
    const { port, far } = await plug();
    far.detach();
    bench.attach();
    const [again] = await serial.getPorts();
    expect(again).not.toBe(port);
    await refusesWith("NetworkError", port.open({ baudRate: 9600 }));
    await again?.open({ baudRate: 9600 });
  });
});

describe("an event on its way from port to serial", () => {
  const capture = { capture: true };

  benchTest("is captured from the top, then bubbles up", async ({ plug, serial }) => {
    const { port } = await plug();
    const seen: string[] = [];
    for (const target of [serial, port] as Targeted[]) {
      target.addEventListener("foo", () => seen.push(`bubbling ${target.constructor.name}`));
      target.addEventListener(
        "foo",
        (event) =>
          seen.push(`capturing ${event.currentTarget === target ? target.constructor.name : "?"} ${event.eventPhase}`),
        capture,
      );
    }
    (port as Targeted).dispatchEvent(new CustomEvent("foo", { bubbles: true }));
    expect(seen).toEqual(["capturing Serial 1", "capturing SerialPort 2", "bubbling SerialPort", "bubbling Serial"]);
  });

  for (const how of ["stopPropagation", "cancelBubble"] as const) {
    for (const options of [capture, undefined]) {
      benchTest(
        `goes no further after ${how} while ${options ? "capturing" : "bubbling"}`,
        async ({ plug, serial }) => {
          const { port } = await plug();
          const first: EventTarget = options ? serial : port;
          const seen: unknown[] = [];
          for (const target of [serial, port] as Targeted[]) {
            const listener = (event: Event): void => {
              seen.push(event.currentTarget);
              if (event.currentTarget !== first) return;
              if (how === "cancelBubble") event.cancelBubble = true;
              else event.stopPropagation();
            };
            if (options) target.addEventListener("foo", listener, options);
            target.addEventListener("foo", listener);
          }
          (port as Targeted).dispatchEvent(new CustomEvent("foo", { bubbles: true }));
          expect(seen).toEqual([first]);
        },
      );
    }
  }

  benchTest("lets an event that a listener sends run to its end first", async ({ plug, serial }) => {
    const { port } = await plug();
    const seen: string[] = [];
    for (const target of [serial, port] as Targeted[]) {
      const listener = (event: Event): void => {
        seen.push(`${event.type} ${(event.currentTarget as object).constructor.name}`);
        if (event.currentTarget === serial && event.type === "foo")
          (port as Targeted).dispatchEvent(new CustomEvent("bar", { bubbles: true }));
      };
      target.addEventListener("foo", listener, capture);
      target.addEventListener("bar", listener);
    }
    (port as Targeted).dispatchEvent(new CustomEvent("foo", { bubbles: true }));
    expect(seen).toEqual(["foo Serial", "bar SerialPort", "bar Serial", "foo SerialPort"]);
  });

  benchTest(
    "calls a listener once that was added twice, not at all once removed, and `once` once",
    async ({ plug }) => {
      const { port } = await plug();
      const target = port as Targeted;
      let calls = 0;
      const listener = (): void => void (calls += 1);
      target.addEventListener("foo", listener);
      target.addEventListener("foo", listener);
      target.addEventListener("foo", { handleEvent: () => void (calls += 10) }, { once: true });
      const stop = new AbortController();
      target.addEventListener("foo", () => void (calls += 100), { signal: stop.signal });
      stop.abort();
      target.dispatchEvent(new Event("foo"));
      target.removeEventListener("foo", listener);
      target.dispatchEvent(new Event("foo"));
      expect(calls).toBe(11);
    },
  );
});
