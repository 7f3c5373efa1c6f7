import { createRealClock } from "@/lib/serial/clock/real-clock";
import { DuplexPort } from "@/lib/serial/node/duplex-port";
import type { ByteDuplex } from "@/lib/serial/node/duplex-port";
import type { SerialOpenOptions } from "@/lib/serial/port";
import type { PageSays, Standing, TestSays } from "./serial-bridge-words";

/* Runs in the page before its own scripts: `navigator.serial` whose one adapter leads to the test's process. */

/** Tells this document from the ones before and after it; a page without a secure context has no better source. */
const document = `${performance.timeOrigin} ${Math.random()}`;

function say(says: PageSays): void {
  const bridge = window.backporchSerialBridge;
  if (!bridge) throw new Error("The bridge to the test is missing.");
  bridge(JSON.stringify({ document, says }));
}

/**
 * The connection that the test's process holds, as a stream.
 *
 * Bytes are pushed by that process, so what comes before somebody listens, or while it is paused, waits here.
 */
class BridgedStream implements ByteDuplex {
  readonly #listeners = { data: (_: Uint8Array) => {}, close: () => {}, error: (_: Error) => {} };
  readonly #arrived: (Uint8Array | "end")[] = [];
  #isOver = false;
  #flows = false;

  on(event: "data" | "close" | "error", listener: (given: never) => void): this {
    Object.assign(this.#listeners, { [event]: listener });
    if (event === "data") queueMicrotask(() => this.resume());
    return this;
  }

  /** A write is done when it was said: where the connection is gone by then, its end is on the way. */
  write(bytes: Uint8Array, done: (error?: Error | null) => void): void {
    say({ kind: "write", bytes: String.fromCharCode(...bytes) });
    queueMicrotask(() => done(null));
  }

  pause(): void {
    this.#flows = false;
  }

  resume(): void {
    this.#flows = true;
    this.#flush();
  }

  destroy(): void {
    if (this.#isOver) return;
    this.#isOver = true;
    say({ kind: "close" });
  }

  /** Takes bytes, or the end, from the test's process. */
  arrive(what: Uint8Array | "end"): void {
    this.#arrived.push(what);
    this.#flush();
  }

  /** Hands on what waits; a listener may pause or destroy in the midst of it. */
  #flush(): void {
    while (this.#flows && !this.#isOver) {
      const next = this.#arrived.shift();
      if (next === undefined) return;
      if (next !== "end") this.#listeners.data(next);
      else {
        this.#isOver = true;
        this.#listeners.close();
      }
    }
  }
}

/** This document's side of the talk with the test's process: one stream at a time. */
class Talk {
  readonly standing: Promise<Standing>;
  #stand: (standing: Standing) => void = () => {};
  readonly #asked: ((isOpen: boolean) => void)[] = [];
  #stream: BridgedStream | null = null;

  constructor() {
    this.standing = new Promise((resolve) => (this.#stand = resolve));
    say({ kind: "hello" });
  }

  async connect(options: SerialOpenOptions): Promise<ByteDuplex> {
    const answer = new Promise<boolean>((resolve) => this.#asked.push(resolve));
    say({ kind: "open", options });
    if (!(await answer) || !this.#stream) throw new Error("The port is refused.");
    return this.#stream;
  }

  /** @param plug what to do with the adapter when the test pulls it or plugs it in */
  hear(says: TestSays, plug: (says: TestSays & { readonly kind: "unplug" | "plugIn" }) => void): void {
    switch (says.kind) {
      case "standing":
        return this.#stand(says);
      case "opened":
        // Made at once: bytes may be right behind.
        this.#stream = says.isOpen ? new BridgedStream() : null;
        return this.#asked.shift()?.(says.isOpen);
      case "bytes":
        return this.#stream?.arrive(Uint8Array.from(says.bytes, (character) => character.charCodeAt(0)));
      case "end":
        return this.#stream?.arrive("end");
      default:
        return plug(says);
    }
  }
}

function install(): void {
  const talk = new Talk();
  const adapter = new DuplexPort({ clock: createRealClock(), connect: (options) => talk.connect(options), isPlugged: false });
  const { machine } = adapter;
  const { serial } = machine;
  let isGranted = false;
  const plugIn = (announced: boolean): void => machine.choose(adapter.plugIn({ granted: isGranted, announced }));
  const ready = talk.standing.then((standing) => {
    isGranted = standing.isGranted;
    if (standing.isPlugged) plugIn(false);
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
      say({ kind: "granted" });
      return port;
    },
  });
  Object.defineProperty(Navigator.prototype, "serial", { configurable: true, get: () => serial });
  window.backporchSerialHear = ({ document: addressed, says }) => {
    if (addressed !== document) return;
    talk.hear(says, (act) => (act.kind === "unplug" ? adapter.unplug(act.order) : plugIn(true)));
  };
}

if (window.top === window && window.backporchSerialBridge) install();
