import { createRealClock } from "@/lib/serial/clock/real-clock";
import { DuplexPort } from "@/lib/serial/node/duplex-port";
import type { ByteDuplex } from "@/lib/serial/node/duplex-port";
import type { SerialOpenOptions } from "@/lib/serial/port";
import type { PageSays, Standing, TestSays } from "./serial-bridge-words";

/* Runs in the page before its own scripts: `navigator.serial` whose one adapter leads to the test's process. */

function say(says: PageSays): Promise<TestSays> {
  const bridge = window.backporchSerialBridge;
  if (!bridge) throw new Error("The bridge to the test is missing.");
  return bridge(says);
}

/** The connection that the test's process holds, as a stream. */
class BridgedStream implements ByteDuplex {
  readonly #listeners = { data: (_: Uint8Array) => {}, close: () => {}, error: (_: Error) => {} };
  #isOver = false;
  #isPaused = false;
  #resume: () => void = () => {};

  on(event: "data" | "close" | "error", listener: (given: never) => void): this {
    Object.assign(this.#listeners, { [event]: listener });
    if (event === "data") void this.#read();
    return this;
  }

  write(bytes: Uint8Array, done: (error?: Error | null) => void): void {
    void say({ kind: "write", bytes: [...bytes] }).then((isWritten) =>
      done(isWritten === true ? null : new Error("The connection is gone.")),
    );
  }

  pause(): void {
    this.#isPaused = true;
  }

  resume(): void {
    this.#isPaused = false;
    this.#resume();
  }

  destroy(): void {
    this.#isOver = true;
    void say({ kind: "close" });
  }

  async #read(): Promise<void> {
    while (!this.#isOver) {
      if (this.#isPaused) await new Promise<void>((resolve) => (this.#resume = resolve));
      const bytes = await say({ kind: "read" });
      if (this.#isOver) return;
      if (!Array.isArray(bytes)) return this.#listeners.close();
      this.#listeners.data(Uint8Array.from(bytes as readonly number[]));
    }
  }
}

async function connect(options: SerialOpenOptions): Promise<ByteDuplex> {
  if ((await say({ kind: "open", options })) !== true) throw new Error("The port is refused.");
  return new BridgedStream();
}

function install(): void {
  const adapter = new DuplexPort({ clock: createRealClock(), connect, isPlugged: false });
  const { machine } = adapter;
  const { serial } = machine;
  let isGranted = false;
  const plugIn = (announced: boolean): void => machine.choose(adapter.plugIn({ granted: isGranted, announced }));
  const ready = say({ kind: "hello" }).then((standing) => {
    isGranted = (standing as Standing).isGranted;
    if ((standing as Standing).isPlugged) plugIn(false);
  });
  const getPorts = serial.getPorts.bind(serial);
  const requestPort = serial.requestPort.bind(serial);
  Object.assign(serial, {
    getPorts: () => ready.then(() => getPorts()),
    requestPort: async (options?: object) => {
      // Asked at once: the activation passes while the test's process is asked.
      if (navigator.userActivation.isActive) machine.userGesture();
      await ready;
      const port = await requestPort(options);
      isGranted = true;
      await say({ kind: "granted" });
      return port;
    },
  });
  Object.defineProperty(Navigator.prototype, "serial", { configurable: true, get: () => serial });
  window.backporchSerialControls = { unplug: (order) => adapter.unplug(order), plugIn: () => plugIn(true) };
}

if (window.top === window && window.backporchSerialBridge) install();
