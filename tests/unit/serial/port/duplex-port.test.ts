import { EventEmitter } from "node:events";
import { describe, expect, test } from "vitest";
import { createVirtualClock } from "@/lib/serial/clock/virtual-clock";
import { DuplexPort } from "@/lib/serial/node/duplex-port";
import type { ByteDuplex } from "@/lib/serial/node/duplex-port";
import { numbered, readBytes, refusesWith } from "./bench-test";

/** A byte stream of Node's kind whose other end is the test. */
class Stream extends EventEmitter implements ByteDuplex {
  readonly written: number[] = [];
  isPaused = false;
  isDestroyed = false;
  writeError: Error | null = null;

  write(bytes: Uint8Array, done: (error?: Error | null) => void): void {
    this.written.push(...bytes);
    queueMicrotask(() => done(this.writeError));
  }

  pause(): void {
    this.isPaused = true;
  }

  resume(): void {
    this.isPaused = false;
  }

  destroy(): void {
    this.isDestroyed = true;
  }
}

const LINE = { baudRate: 115_200, bufferSize: 1024 };

function duplexTest(name: string, body: (scene: { adapter: DuplexPort; streams: Stream[] }) => Promise<void>): void {
  test(name, async () => {
    const clock = createVirtualClock();
    const streams: Stream[] = [];
    const connect = () => {
      const stream = new Stream();
      streams.push(stream);
      return Promise.resolve(stream);
    };
    await clock.run(body({ adapter: new DuplexPort({ clock, connect }), streams }));
    await clock.advance(1);
    expect(clock.pendingTimers()).toBe(0);
  });
}

describe("a port over a byte stream", () => {
  duplexTest(
    "connects at open, carries bytes both ways, and ends the stream at close",
    async ({ adapter, streams }) => {
      const { port } = adapter;
      await port.open(LINE);
      const [stream] = streams;
      const writer = port.writable!.getWriter();
      await writer.write(numbered(5));
      await writer.close();
      expect(stream!.written).toEqual([0, 1, 2, 3, 4]);
      const reader = port.readable!.getReader();
      stream!.emit("data", Uint8Array.of(7, 8));
      expect(await readBytes(reader, 2)).toEqual(Uint8Array.of(7, 8));
      reader.releaseLock();
      writer.releaseLock();
      await port.close();
      expect(stream!.isDestroyed).toBe(true);
    },
  );

  duplexTest("connects anew at each open", async ({ adapter, streams }) => {
    const { port } = adapter;
    for (let turn = 1; turn <= 3; turn += 1) {
      await port.open(LINE);
      const writer = port.writable!.getWriter();
      await writer.write(Uint8Array.of(turn));
      await writer.close();
      writer.releaseLock();
      await port.close();
      expect(streams.map(({ written }) => written)).toEqual(Array.from({ length: turn }, (_, index) => [index + 1]));
    }
  });

  duplexTest("is unplugged when the stream ends by itself", async ({ adapter, streams }) => {
    const { port } = adapter;
    await port.open(LINE);
    const reader = port.readable!.getReader();
    const read = refusesWith("NetworkError", reader.read());
    streams[0]!.emit("close");
    await read;
    expect(await adapter.machine.serial.getPorts()).toEqual([]);
    adapter.plugIn();
    expect(adapter.port).not.toBe(port);
    await adapter.port.open(LINE);
  });

  duplexTest("is unplugged when a write fails", async ({ adapter, streams }) => {
    const { port } = adapter;
    await port.open(LINE);
    streams[0]!.writeError = new Error("gone");
    await port.writable!.getWriter().write(numbered(3));
    await refusesWith("NetworkError", port.readable!.getReader().read());
    expect(streams[0]!.isDestroyed).toBe(true);
  });

  duplexTest("ends the stream when the adapter is pulled and the port closed", async ({ adapter, streams }) => {
    const { port } = adapter;
    await port.open(LINE);
    adapter.unplug();
    await port.close();
    expect(streams[0]!.isDestroyed).toBe(true);
  });

  duplexTest("holds the stream back while nobody reads, and lets it go on after", async ({ adapter, streams }) => {
    const { port } = adapter;
    await port.open(LINE);
    const stream = streams[0]!;
    for (let block = 0; block < 90; block += 1) stream.emit("data", numbered(1000));
    expect(stream.isPaused).toBe(true);
    expect((await readBytes(port.readable!.getReader(), 90_000)).length).toBe(90_000);
    expect(stream.isPaused).toBe(false);
  });

  test("does not open where the stream cannot be had", async () => {
    const clock = createVirtualClock();
    const adapter = new DuplexPort({ clock, connect: () => Promise.reject(new Error("no such device")) });
    await clock.run(refusesWith("NetworkError", adapter.port.open(LINE)));
  });
});
