import { describe, expect } from "vitest";
import { benchTest, detach, EIGHT, numbered, receiveBytes, refusesWith } from "./bench-test";

// Source of each expectation here: WICG/serial, "writable attribute", WICG/serial#69; the W3C test suite serial/serialPort_writable*.
describe("writable", () => {
  benchTest("hands on what was written", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const writer = port.writable!.getWriter();
    const written = writer.write(EIGHT);
    writer.releaseLock();
    await far.whenTalking();
    expect(await far.receive()).toEqual({ value: EIGHT, done: false });
    await written;
    await port.close();
  });

  benchTest("hands on far more than the buffer holds, in order", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const writer = port.writable!.getWriter();
    const written = writer.write(numbered(1024));
    expect(await receiveBytes(far, 1024)).toEqual(numbered(1024));
    await written;
  });

  benchTest("has written when the bytes are in the buffer, before any has left", async ({ plug, clock }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const writer = port.writable!.getWriter();
    await writer.write(numbered(64));
    let isWritten = false;
    const more = writer.write(Uint8Array.of(1)).then(() => (isWritten = true));
    await new Promise<void>((resolve) => clock.after(1000, resolve));
    expect(isWritten).toBe(false);
    await far.receive();
    await more;
  });

  benchTest("asks for one chunk at a time", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600 });
    // Engine: high-water mark 1 counted in chunks, where the specification says bufferSize in bytes.
    expect(port.writable!.getWriter().desiredSize).toBe(1);
  });

  benchTest("takes an ArrayBuffer and any view, and refuses anything else with TypeError", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const writer = port.writable!.getWriter() as WritableStreamDefaultWriter<unknown>;
    await writer.write(EIGHT.buffer);
    await writer.write(new DataView(EIGHT.buffer, 2, 3));
    await writer.write(new Uint16Array([0x0201]));
    expect(await far.receive()).toEqual({ value: Uint8Array.from([...EIGHT, 3, 4, 5, 1, 2]), done: false });
    await expect(writer.write("text")).rejects.toThrow(TypeError);
  });

  benchTest("treats a detached buffer as an empty one", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const writer = port.writable!.getWriter();
    const data = new Uint8Array(64);
    detach(data);
    await writer.write(data);
    writer.releaseLock();
    await port.close();
  });

  benchTest("looks at the chunk as it stands: detaching it in the middle ends the write", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const writer = port.writable!.getWriter();
    const data = new Uint8Array(1024);
    const written = writer.write(data);
    writer.releaseLock();
    await receiveBytes(far, 512);
    detach(data);
    await written;
    await port.close();
  });

  benchTest("can be piped to, through a chain", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const encoder = new TextEncoderStream();
    const piped = encoder.readable.pipeThrough(new TransformStream()).pipeTo(port.writable!);
    const writer = encoder.writable.getWriter();
    const written = writer.write("Hello world");
    expect(new TextDecoder().decode((await far.receive()).value)).toBe("Hello world");
    await written;
    await writer.close();
    await piped;
    await port.close();
    expect(port.writable).toBeNull();
  });
});

describe("close of a writer", () => {
  benchTest("waits until the last byte has left, then the stream is a new one", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const first = port.writable!;
    const writer = first.getWriter();
    void writer.write(numbered(1024));
    let allReceived = false;
    const closed = writer.close().then(() => expect(allReceived).toBe(true));
    const received = receiveBytes(far, 1024).then((bytes) => {
      allReceived = true;
      return bytes;
    });
    expect(await received).toEqual(numbered(1024));
    await closed;
    expect(await far.receive()).toEqual({ done: true });
    expect(port.writable).not.toBe(first);
    expect(port.writable).not.toBeNull();
  });
});

describe("abort of a writer", () => {
  benchTest("throws away what was written and not sent, and the next stream works", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const first = port.writable!;
    const writer = first.getWriter();
    await writer.write(EIGHT);
    await writer.abort();
    const second = port.writable!;
    expect(second).not.toBe(first);
    const next = second.getWriter();
    void next.write(Uint8Array.of(9));
    await far.whenTalking();
    expect(await far.receive()).toEqual({ value: Uint8Array.of(9), done: false });
  });

  benchTest("rejects a pending write with its reason at once", async ({ plug, clock }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const writer = port.writable!.getWriter();
    const startMs = clock.nowMs();
    const written = writer.write(new Uint8Array(1024)).catch((reason: unknown) => reason);
    await writer.abort("Aborting.");
    expect(await written).toBe("Aborting.");
    expect(clock.nowMs()).toBe(startMs);
    writer.releaseLock();
    await port.close();
  });

  benchTest("frees a close that waits under flow control", async ({ plug, clock }) => {
    const { port, far } = await plug({}, { osBuffer: 32 });
    far.setInputSignals({ dataCarrierDetect: false, clearToSend: false, ringIndicator: false, dataSetReady: false });
    await port.open({ baudRate: 9600, flowControl: "hardware" });
    const writer = port.writable!.getWriter();
    await writer.write(EIGHT);
    const closed = writer.close().catch((reason: unknown) => reason);
    await writer.abort("held back").catch(() => undefined);
    expect(await closed).toBe("held back");
    writer.releaseLock();
    // What was held back is gone, and the port has a new stream.
    await new Promise<void>((resolve) => clock.after(1, resolve));
    const next = port.writable!.getWriter();
    await next.write(Uint8Array.of(9));
    far.setInputSignals({ dataCarrierDetect: false, clearToSend: true, ringIndicator: false, dataSetReady: false });
    expect(await far.receive()).toEqual({ value: Uint8Array.of(9), done: false });
    next.releaseLock();
    await port.close();
  });

  benchTest("does not keep close from working while it is under way", async ({ plug }) => {
    const { port } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const writer = port.writable!.getWriter();
    const closed = writer.write(new Uint8Array(1024)).catch(async (reason: unknown) => {
      expect(reason).toBe("Aborting.");
      writer.releaseLock();
      await port.close();
      expect(port.writable).toBeNull();
    });
    await writer.abort("Aborting.");
    await closed;
  });

  benchTest("fails with NetworkError when the device is lost meanwhile", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const writer = port.writable!.getWriter();
    await far.whenTalking();
    far.faultOnWrite("lost");
    const written = writer.write(new Uint8Array(1024)).catch((reason: unknown) => reason);
    await refusesWith("NetworkError", writer.abort("Aborting"));
    expect(await written).toBe("Aborting");
    await port.close();
  });
});

describe("an error while writing", () => {
  benchTest("of the system rejects with UnknownError, and a new stream works", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const first = port.writable!;
    await far.whenTalking();
    far.faultOnWrite("system");
    await refusesWith("UnknownError", first.getWriter().write(EIGHT));
    // Engine: replaced by a new stream, where the specification's steps keep the old one.
    expect(port.writable).not.toBe(first);
    const writer = port.writable!.getWriter();
    const written = writer.write(EIGHT);
    writer.releaseLock();
    await far.whenTalking();
    expect(await far.receive()).toEqual({ value: EIGHT, done: false });
    await written;
    await port.close();
  });

  benchTest("of a lost device rejects with NetworkError and leaves no writable", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const writer = port.writable!.getWriter();
    await far.whenTalking();
    far.faultOnWrite("lost");
    await refusesWith("NetworkError", writer.write(EIGHT));
    expect(port.writable).toBeNull();
    await port.close();
  });

  benchTest("rejects a write that waits for room", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, bufferSize: 64 });
    const written = refusesWith("UnknownError", port.writable!.getWriter().write(new Uint8Array(1024)));
    far.faultOnWrite("system");
    await written;
  });
});

describe("hardware flow control", () => {
  benchTest("holds bytes back until the device is clear to send", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600, flowControl: "hardware" });
    await port.writable!.getWriter().write(EIGHT);
    let received: unknown = null;
    const waiting = far.receive().then((next) => (received = next));
    await far.whenTalking();
    expect(received).toBeNull();
    far.setInputSignals({ dataCarrierDetect: false, clearToSend: true, ringIndicator: false, dataSetReady: false });
    expect(await waiting).toEqual({ value: EIGHT, done: false });
  });
});
