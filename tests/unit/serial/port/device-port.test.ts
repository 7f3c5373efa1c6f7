import { describe, expect } from "vitest";
import { faultAtByte } from "@/lib/serial/simulator/wire-fault";
import { numbered, readBytes, refusesWith } from "./bench-test";
import { BYTE_MS, deviceTest, LINE, wait, write } from "./device-scene";

describe("a device on a simulated port", () => {
  deviceTest("hears and answers at the speed of the line", async ({ adapter, device, clock }) => {
    await adapter.port.open(LINE);
    const startMs = clock.nowMs();
    await write(adapter, numbered(100));
    const reader = adapter.port.readable!.getReader();
    expect(await readBytes(reader, 100)).toEqual(numbered(100));
    expect(device.heard[0]!.atMs - startMs).toBeCloseTo(BYTE_MS, 6);
    expect(device.heard[99]!.atMs - startMs).toBeCloseTo(100 * BYTE_MS, 6);
    // The first byte is said again while the second is heard: both ways at once.
    expect(clock.nowMs() - startMs).toBeCloseTo(101 * BYTE_MS, 6);
    expect(adapter.counts).toEqual({ hostToDeviceBytes: 100, deviceToHostBytes: 100 });
  });

  deviceTest(
    "hears at once where the line has no pace",
    async ({ adapter, clock }) => {
      await adapter.port.open(LINE);
      const startMs = clock.nowMs();
      await write(adapter, numbered(200));
      expect(await readBytes(adapter.port.readable!.getReader(), 200)).toEqual(numbered(200));
      expect(clock.nowMs()).toBe(startMs);
    },
    { pacing: "none" },
  );

  deviceTest("gets every byte of a write larger than all buffers", async ({ adapter, device }) => {
    device.echoes = false;
    await adapter.port.open({ ...LINE, bufferSize: 64 });
    const writer = adapter.port.writable!.getWriter();
    void writer.write(numbered(10_000));
    await writer.close();
    expect(Uint8Array.from(device.heard, ({ byte }) => byte)).toEqual(numbered(10_000));
  });

  deviceTest(
    "writes to the wire long after write() resolved, and close of the writer waits for it",
    async ({ adapter, device, clock }) => {
      await adapter.port.open({ ...LINE, bufferSize: 8192 });
      const writer = adapter.port.writable!.getWriter();
      await writer.write(numbered(1000));
      // WICG/serial#69: a resolved write is in a buffer, not on the wire.
      expect(device.heard).toEqual([]);
      const startMs = clock.nowMs();
      await writer.close();
      expect(device.heard).toHaveLength(1000);
      expect(clock.nowMs() - startMs).toBeCloseTo(1000 * BYTE_MS, 6);
    },
  );

  deviceTest("never gets what was in the buffers when the port was closed", async ({ adapter, device, clock }) => {
    await adapter.port.open(LINE);
    await write(adapter, numbered(200));
    await wait(clock, 50.5 * BYTE_MS);
    await adapter.port.close();
    await wait(clock, 100);
    expect(device.heard).toHaveLength(50);
  });

  deviceTest("is heard as garbage through other line settings, and is sent garbage", async ({ adapter, device }) => {
    await adapter.port.open({ ...LINE, baudRate: 9600 });
    await write(adapter, numbered(20));
    const heard = await readBytes(adapter.port.readable!.getReader(), 20);
    expect(Uint8Array.from(device.heard, ({ byte }) => byte)).not.toEqual(numbered(20));
    expect(heard).not.toEqual(numbered(20));
  });

  deviceTest(
    "loses bytes in silence where the page does not read and the system does not tell (POSIX)",
    async ({ adapter, device, clock }) => {
      await adapter.port.open({ ...LINE, bufferSize: 64 });
      const reader = adapter.port.readable!.getReader();
      for (let block = 0; block < 60; block += 1) {
        device.say(...numbered(100));
        await wait(clock, 100 * BYTE_MS);
      }
      const bytes = await readBytes(reader, 64 + 4096);
      expect(bytes).toHaveLength(64 + 4096);
      device.say(1, 2, 3);
      expect((await reader.read()).value).toEqual(Uint8Array.of(1));
    },
  );

  deviceTest(
    "makes the page hear of lost bytes where the system tells (Windows)",
    async ({ adapter, device, clock }) => {
      await adapter.port.open({ ...LINE, bufferSize: 64 });
      const reader = adapter.port.readable!.getReader();
      device.say(...numbered(200));
      await wait(clock, 300 * BYTE_MS);
      expect(await readBytes(reader, 96)).toEqual(numbered(96));
      await refusesWith("BufferOverrunError", reader.read());
    },
    { reportsOverrun: true, osBufferBytes: 32 },
  );

  deviceTest(
    "restarts when opening raises DTR, if it is built so",
    async ({ adapter, device }) => {
      await adapter.port.open(LINE);
      expect(device.restarts).toBe(1);
      await adapter.port.setSignals({ requestToSend: false });
      expect(device.restarts).toBe(1);
    },
    { restartsOnDtr: true },
  );

  deviceTest("raises DTR and RTS at open, as Windows, macOS and Linux do", async ({ adapter }) => {
    await adapter.port.open(LINE);
    expect(adapter.far?.outputSignals).toEqual({ dataTerminalReady: true, requestToSend: true, break: false });
  });

  deviceTest("does not open while another program has it", async ({ adapter }) => {
    adapter.far?.refuseOpen(true);
    await refusesWith("NetworkError", adapter.port.open(LINE));
    adapter.far?.refuseOpen(false);
    await adapter.port.open(LINE);
  });
});

describe("pulling the plug", () => {
  for (const order of ["stream-first", "event-first"] as const) {
    deviceTest(
      `${order}: bytes received come first, both streams fail, disconnect fires, close works`,
      async ({ adapter, device }) => {
        const { port } = adapter;
        await port.open(LINE);
        const seen: string[] = [];
        adapter.serial.addEventListener("disconnect", (event) =>
          seen.push(event.target === port ? "disconnect" : "other"),
        );
        const reader = port.readable!.getReader();
        const writer = port.writable!.getWriter();
        device.say(1, 2, 3);
        expect(await readBytes(reader, 3)).toEqual(Uint8Array.of(1, 2, 3));
        const read = refusesWith("NetworkError", reader.read()).then(() => seen.push("stream"));
        adapter.unplug(order);
        expect(await adapter.serial.getPorts()).toEqual([]);
        await read;
        await refusesWith("NetworkError", writer.write(Uint8Array.of(1)));
        expect(seen.toSorted()).toEqual(["disconnect", "stream"]);
        expect(seen[0]).toBe(order === "stream-first" ? "stream" : "disconnect");
        expect([port.readable, port.writable]).toEqual([null, null]);
        await port.close();
        await refusesWith("NetworkError", port.open(LINE));
      },
    );
  }

  deviceTest("unknown-error-first: looks recoverable once, then is lost", async ({ adapter }) => {
    const { port } = adapter;
    await port.open(LINE);
    const reader = port.readable!.getReader();
    const read = refusesWith("UnknownError", reader.read());
    adapter.unplug("unknown-error-first");
    await read;
    const next = port.readable?.getReader();
    if (next) await refusesWith("NetworkError", next.read());
    expect(port.readable).toBeNull();
    await port.close();
  });

  deviceTest("at a byte: the bytes before it arrive, the rest never does", async ({ adapter, device }) => {
    await adapter.port.open(LINE);
    const fault = faultAtByte("device-to-host", 2, { kind: "unplug" });
    adapter.setFault(fault);
    const reader = adapter.port.readable!.getReader();
    device.say(1, 2, 3, 4);
    expect(await readBytes(reader, 2)).toEqual(Uint8Array.of(1, 2));
    await refusesWith("NetworkError", reader.read());
    expect(fault.fired).toBe(true);
  });

  deviceTest("and putting it back makes a new port on the same device", async ({ adapter, device }) => {
    const before = adapter.port;
    await before.open(LINE);
    adapter.unplug();
    device.say(9);
    const after = adapter.replug();
    expect(after).not.toBe(before);
    expect(await adapter.serial.getPorts()).toEqual([after]);
    await after.open(LINE);
    const reader = after.readable!.getReader();
    device.say(1);
    expect((await reader.read()).value).toEqual(Uint8Array.of(1));
  });
});

describe("a fault on the line", () => {
  deviceTest("reaches the device's bytes and the host's alike", async ({ adapter, device, clock }) => {
    await adapter.port.open(LINE);
    adapter.setFault(faultAtByte("host-to-device", 1, { kind: "flip", mask: 1 }));
    await write(adapter, Uint8Array.of(10, 20, 30));
    await wait(clock, 5);
    expect(device.heard.map(({ byte }) => byte)).toEqual([10, 21, 30]);
    adapter.setFault(null);
    await write(adapter, Uint8Array.of(40));
    await wait(clock, 5);
    expect(device.heard.at(-1)?.byte).toBe(40);
  });

  deviceTest("can be a parity error: the stream is replaced and the line goes on", async ({ adapter, device }) => {
    await adapter.port.open(LINE);
    adapter.setFault(faultAtByte("device-to-host", 1, { kind: "read-error", fault: "parity" }));
    const reader = adapter.port.readable!.getReader();
    device.say(1, 2, 3);
    expect((await reader.read()).value).toEqual(Uint8Array.of(1));
    await refusesWith("ParityError", reader.read());
    expect((await adapter.port.readable!.getReader().read()).value).toEqual(Uint8Array.of(3));
  });

  deviceTest(
    "can be an error while writing: the rest of the write is gone, a new stream works",
    async ({ adapter, device, clock }) => {
      await adapter.port.open({ ...LINE, bufferSize: 64 });
      adapter.setFault(faultAtByte("host-to-device", 3, { kind: "write-error" }));
      const writer = adapter.port.writable!.getWriter();
      await refusesWith("UnknownError", writer.write(numbered(10_000)));
      await wait(clock, 100);
      expect(device.heard.map(({ byte }) => byte)).toEqual([0, 1, 2]);
      await write(adapter, Uint8Array.of(77));
      await wait(clock, 5);
      expect(device.heard.at(-1)?.byte).toBe(77);
    },
  );

  deviceTest("can be a restart of the device", async ({ adapter, device, clock }) => {
    await adapter.port.open(LINE);
    adapter.setFault(faultAtByte("host-to-device", 0, { kind: "restart" }));
    await write(adapter, Uint8Array.of(1));
    await wait(clock, 5);
    expect(device.restarts).toBe(1);
  });
});
