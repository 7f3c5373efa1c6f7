import { describe, expect } from "vitest";
import type { SerialOpenOptions } from "@/lib/serial/port";
import { benchTest, EIGHT, refusesWith } from "./bench-test";

// Source of each expectation here: WICG/serial, "SerialPort interface"; the W3C test suite serial/serialPort_open, _close, _forget.
describe("open", () => {
  benchTest("is refused while the port is open", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600 });
    await refusesWith("InvalidStateError", port.open({ baudRate: 9600 }));
  });

  benchTest("is refused while another open is under way, which goes on", async ({ plug }) => {
    const { port } = await plug();
    const first = port.open({ baudRate: 9600 });
    await refusesWith("InvalidStateError", port.open({ baudRate: 9600 }));
    await first;
    expect(port.readable).not.toBeNull();
  });

  const wrong: Record<string, unknown>[] = [
    {},
    ...[-1, 0, "fast", NaN, 2 ** 32].map((baudRate) => ({ baudRate })),
    ...[-1, 0, 6, 9].map((dataBits) => ({ baudRate: 9600, dataBits })),
    ...[-1, 0, 3, 4].map((stopBits) => ({ baudRate: 9600, stopBits })),
    ...[0, null, "mark"].map((parity) => ({ baudRate: 9600, parity })),
    ...[-1, 0, 16 * 1024 * 1024 + 1, 1024 ** 3].map((bufferSize) => ({ baudRate: 9600, bufferSize })),
    { baudRate: 9600, flowControl: "xon" },
  ];
  benchTest("refuses each wrong option with TypeError and leaves the port closed", async ({ plug }) => {
    const { port } = await plug();
    for (const options of wrong) await expect(port.open(options as SerialOpenOptions)).rejects.toThrow(TypeError);
    await port.open({ baudRate: 9600 });
  });

  benchTest("takes each option that the specification allows, and a buffer of 16 MiB", async ({ plug }) => {
    const { port } = await plug();
    const allowed: Partial<SerialOpenOptions>[] = [
      { dataBits: 7 },
      { dataBits: 8 },
      { stopBits: 1 },
      { stopBits: 2 },
      { parity: "none" },
      { parity: "even" },
      { parity: "odd" },
      { flowControl: "none" },
      { flowControl: "hardware" },
      { bufferSize: 1 },
      { bufferSize: 16 * 1024 * 1024 },
      { parity: undefined },
    ];
    for (const options of allowed) {
      await port.open({ baudRate: 9600, ...options });
      await port.close();
    }
  });

  benchTest("fails with one NetworkError for every cause, and can be tried again", async ({ plug, bench }) => {
    const { port, far } = await plug();
    far.detach();
    await refusesWith("NetworkError", port.open({ baudRate: 9600 }));
    // Engine: closed again after a failed open, where the specification's steps leave "opening".
    await refusesWith("NetworkError", port.open({ baudRate: 9600 }));
    await refusesWith("InvalidStateError", port.close());
    bench.reset();
  });
});

describe("close", () => {
  benchTest("is refused on a port that is not open, closed already, or closing", async ({ plug }) => {
    const { port } = await plug();
    await refusesWith("InvalidStateError", port.close());
    await port.open({ baudRate: 9600 });
    const closing = port.close();
    await refusesWith("InvalidStateError", port.close());
    await closing;
    await refusesWith("InvalidStateError", port.close());
  });

  benchTest("is refused with TypeError while readable is locked, and works once it is released", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600 });
    const reader = port.readable?.getReader();
    await expect(port.close()).rejects.toThrow(TypeError);
    expect(port.readable).not.toBeNull();
    reader?.releaseLock();
    await port.close();
    expect(port.readable).toBeNull();
  });

  benchTest("is refused with TypeError while writable is locked, and works once it is released", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600 });
    const writer = port.writable?.getWriter();
    await expect(port.close()).rejects.toThrow(TypeError);
    writer?.releaseLock();
    await port.close();
    expect(port.writable).toBeNull();
  });

  benchTest("ends both streams: readable is done, writable fails with InvalidStateError", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600 });
    const { readable, writable } = port;
    await port.close();
    expect(await readable?.getReader().read()).toEqual({ value: undefined, done: true });
    await refusesWith("InvalidStateError", writable!.getWriter().write(EIGHT));
  });

  benchTest("has no streams before open, while closing and after close; otherwise the same ones", async ({ plug }) => {
    const { port } = await plug();
    expect([port.readable, port.writable]).toEqual([null, null]);
    const opening = port.open({ baudRate: 9600 });
    expect([port.readable, port.writable]).toEqual([null, null]);
    await opening;
    expect(port.readable).toBe(port.readable);
    expect(port.writable).toBe(port.writable);
    const closing = port.close();
    expect([port.readable, port.writable]).toEqual([null, null]);
    await closing;
    expect([port.readable, port.writable]).toEqual([null, null]);
  });

  benchTest("throws away what was not sent", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const writer = port.writable!.getWriter();
    await writer.write(EIGHT);
    writer.releaseLock();
    await port.close();
    expect(await far.receive()).toEqual({ done: true });
    await port.open({ baudRate: 9600 });
    const next = port.writable!.getWriter();
    await next.write(Uint8Array.of(9));
    expect(await far.receive()).toEqual({ value: Uint8Array.of(9), done: false });
    next.releaseLock();
  });
});

describe("forget", () => {
  benchTest("lists the port no more, and opening it is a NetworkError", async ({ plug, serial }) => {
    const { port } = await plug();
    expect(await serial.getPorts()).toEqual([port]);
    await port.forget();
    expect(await serial.getPorts()).toEqual([]);
    await refusesWith("NetworkError", port.open({ baudRate: 9600 }));
  });

  benchTest("of an open port fails its streams, and close and the signals are refused", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600 });
    const reader = port.readable!.getReader();
    const writer = port.writable!.getWriter();
    const read = refusesWith("NetworkError", reader.read());
    const closed = refusesWith("NetworkError", writer.closed);
    await port.forget();
    await read;
    await closed;
    await refusesWith("InvalidStateError", port.close());
    await refusesWith("InvalidStateError", port.getSignals());
    await refusesWith("InvalidStateError", port.setSignals({ break: true }));
    expect([port.readable, port.writable]).toEqual([null, null]);
  });

  benchTest(
    "is over when the user grants the adapter anew, with a new port object",
    async ({ plug, bench, serial }) => {
      const { port, far } = await plug();
      await port.forget();
      bench.userGesture();
      bench.choose(far);
      const again = await serial.requestPort();
      expect(again).not.toBe(port);
      await again.open({ baudRate: 9600 });
    },
  );
});
