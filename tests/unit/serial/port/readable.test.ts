import { describe, expect } from "vitest";
import type { ReadFault } from "@/lib/serial/simulator/port-faults";
import { benchTest, EIGHT, numbered, readBytes, refusesWith } from "./bench-test";

// Source of each expectation here: WICG/serial, "readable attribute"; the W3C test suite serial/serialPort_readable_*.
describe("readable", () => {
  benchTest("hands on what was sent", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const reader = port.readable!.getReader();
    await far.whenListening();
    void far.send(EIGHT);
    expect(await reader.read()).toEqual({ value: EIGHT, done: false });
  });

  benchTest("hands on far more than the buffer holds, in order", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const reader = port.readable!.getReader();
    const sent = far.send(numbered(1024));
    expect(await readBytes(reader, 1024)).toEqual(numbered(1024));
    await sent;
  });

  benchTest("holds no more than bufferSize: a sender waits for the rest", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const reader = port.readable!.getReader();
    let isSent = false;
    const sent = far.send(numbered(65)).then(() => (isSent = true));
    await Promise.resolve();
    expect(isSent).toBe(false);
    expect((await reader.read()).value?.length).toBe(64);
    await sent;
    expect((await reader.read()).value?.length).toBe(1);
  });

  benchTest("is pulled only on demand: its queue holds nothing", async ({ plug, clock }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 8 });
    // Engine: high-water mark 0, where the specification says bufferSize; so with no read pending nothing leaves the buffer.
    const reader = port.readable!.getReader();
    await far.send(EIGHT);
    let isSent = false;
    const more = far.send(Uint8Array.of(9)).then(() => (isSent = true));
    await new Promise<void>((resolve) => clock.after(1000, resolve));
    expect(isSent).toBe(false);
    await reader.read();
    await more;
  });

  benchTest("fills a reader's own buffer, and keeps what does not fit", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 1024 });
    const reader = port.readable!.getReader({ mode: "byob" });
    void far.send(numbered(1024));
    const first = await reader.read(new Uint8Array(512));
    expect(first.value).toEqual(numbered(512));
    const second = await reader.read(new Uint8Array(600));
    expect(second.value).toEqual(numbered(1024).subarray(512));
  });

  benchTest("can be piped through transforms, whose end ends it", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const decoder = new TextDecoderStream();
    const piped = port
      .readable!.pipeTo(decoder.writable as WritableStream<Uint8Array>)
      .catch((reason: unknown) => reason);
    const reader = decoder.readable.pipeThrough(new TransformStream()).getReader();
    void far.send(new TextEncoder().encode("Hello world"));
    expect(await reader.read()).toEqual({ value: "Hello world", done: false });
    await reader.cancel("enough");
    expect(await piped).toBe("enough");
    await port.close();
  });
});

describe("cancel of a reader", () => {
  benchTest("ends a pending read at once", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600 });
    const reader = port.readable!.getReader();
    const read = reader.read();
    await reader.cancel();
    expect(await read).toEqual({ value: undefined, done: true });
  });

  benchTest("throws away what was received; the next stream is a new one without it", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const first = port.readable!;
    const reader = first.getReader();
    await far.send(EIGHT);
    await reader.cancel();
    reader.releaseLock();
    const second = port.readable!;
    expect(second).not.toBe(first);
    void far.send(Uint8Array.of(9));
    expect(await second.getReader().read()).toEqual({ value: Uint8Array.of(9), done: false });
  });

  benchTest("throws away what the system holds too", async ({ plug }) => {
    const { port, far } = await plug({}, { osBuffer: 32 });
    await port.open({ baudRate: 9600, bufferSize: 4 });
    const reader = port.readable!.getReader();
    await far.send(numbered(36));
    await reader.cancel();
    reader.releaseLock();
    void far.send(Uint8Array.of(99));
    expect(await port.readable!.getReader().read()).toEqual({ value: Uint8Array.of(99), done: false });
  });

  benchTest("fails a sender that still waits for room", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const reader = port.readable!.getReader();
    const sent = refusesWith("InvalidStateError", far.send(new Uint8Array(1024)));
    await reader.cancel();
    await sent;
  });

  benchTest("does not keep close from working while it is under way", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600 });
    const reader = port.readable!.getReader();
    const closed = (async () => {
      expect((await reader.read()).done).toBe(true);
      reader.releaseLock();
      await port.close();
      expect(port.readable).toBeNull();
    })();
    await reader.cancel();
    await closed;
  });
});

describe("an error while reading", () => {
  const recoverable: [ReadFault, string][] = [
    ["parity", "ParityError"],
    ["framing", "FramingError"],
    ["break", "BreakError"],
    ["overrun", "BufferOverrunError"],
    ["system", "UnknownError"],
  ];
  for (const [fault, name] of recoverable) {
    benchTest(`${fault}: the bytes before it first, then ${name}, then a new stream that works`, async ({ plug }) => {
      const { port, far } = await plug();
      await port.open({ baudRate: 9600, bufferSize: 64 });
      const first = port.readable!;
      const reader = first.getReader();
      void far.send(EIGHT);
      far.faultOnRead(fault);
      expect((await reader.read()).value).toEqual(EIGHT);
      await refusesWith(name, reader.read());
      const second = port.readable!;
      expect(second).not.toBe(first);
      const next = second.getReader();
      void far.send(EIGHT);
      expect((await next.read()).value).toEqual(EIGHT);
      next.releaseLock();
      await port.close();
    });
  }

  benchTest("comes after all bytes sent before it, also those that did not fit the buffer", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 16 });
    const reader = port.readable!.getReader();
    void far.send(numbered(100));
    far.faultOnRead("parity");
    expect(await readBytes(reader, 100)).toEqual(numbered(100));
    await refusesWith("ParityError", reader.read());
  });

  benchTest("of a lost device leaves no readable, and close still works", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const reader = port.readable!.getReader();
    void far.send(EIGHT);
    far.faultOnRead("lost");
    expect((await reader.read()).value).toEqual(EIGHT);
    await refusesWith("NetworkError", reader.read());
    expect(port.readable).toBeNull();
    await refusesWith("InvalidStateError", port.open({ baudRate: 9600 }));
    await port.close();
  });

  benchTest("is not seen before the next pull", async ({ plug, clock }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const readable = port.readable!;
    const reader = readable.getReader();
    let isClosed = false;
    reader.closed.then(
      () => undefined,
      () => (isClosed = true),
    );
    far.detach();
    await new Promise<void>((resolve) => clock.after(1000, resolve));
    expect(isClosed).toBe(false);
    expect(port.readable).toBe(readable);
    await refusesWith("NetworkError", reader.read());
    expect(port.readable).toBeNull();
  });
});

describe("bytes at line speed", () => {
  benchTest("that find no room are lost, what came before is whole, and overrun is told", async ({ plug }) => {
    const { port, far } = await plug({}, { osBuffer: 32 });
    await port.open({ baudRate: 115200, bufferSize: 64 });
    const readable = port.readable!;
    far.blast?.(numbered(200));
    const reader = readable.getReader();
    expect(await readBytes(reader, 96)).toEqual(numbered(96));
    await refusesWith("BufferOverrunError", reader.read());
  });

  benchTest("wait under hardware flow control", async ({ plug }) => {
    const { port, far } = await plug({}, { osBuffer: 32 });
    await port.open({ baudRate: 115200, bufferSize: 64, flowControl: "hardware" });
    far.blast?.(numbered(200));
    expect(await readBytes(port.readable!.getReader(), 200)).toEqual(numbered(200));
  });
});
