import type { Clock } from "@/lib/serial/clock";
import type { SerialOpenOptions, SerialPortIdentity } from "@/lib/serial/port";
import type { SimulatedFarEnd, UnplugOrder } from "@/lib/serial/simulator/far-end";
import type { SimulatedSerialPort } from "@/lib/serial/simulator/simulated-port";
import type { AttachHow } from "@/lib/serial/simulator/simulated-serial";
import { SimulatedMachine } from "@/lib/serial/simulator/simulated-serial";

/** A two-way byte stream as Node has it (a socket, a serial device), as far as it is needed here. */
export interface ByteDuplex {
  on(event: "data", listener: (bytes: Uint8Array) => void): unknown;
  on(event: "close", listener: () => void): unknown;
  on(event: "error", listener: (error: Error) => void): unknown;
  write(bytes: Uint8Array, done: (error?: Error | null) => void): unknown;
  pause(): unknown;
  resume(): unknown;
  destroy(): unknown;
}

export type DuplexPortOptions = {
  readonly clock: Clock;
  /** Connects to the real thing; a rejection makes `open()` fail with NetworkError. */
  readonly connect: (options: SerialOpenOptions) => Promise<ByteDuplex>;
  readonly identity?: SerialPortIdentity;
  /** Whether the adapter is there from the beginning; true by default. */
  readonly isPlugged?: boolean;
};

/** Bytes held for a page that does not read. */
const OS_BUFFER_BYTES = 65_536;
/** Bytes that found no room yet; past that the stream is paused. */
const PAUSE_BYTES = 16_384;

/**
 * A real byte stream behind a port that behaves as the W3C says: connected when the port is opened, destroyed when it is
 * closed, unplugged when the stream ends by itself. Line settings are the business of `connect`.
 */
export class DuplexPort {
  readonly machine: SimulatedMachine;
  readonly #options: DuplexPortOptions;
  #far: SimulatedFarEnd | null = null;
  #next: ByteDuplex | null = null;

  constructor(options: DuplexPortOptions) {
    this.#options = options;
    this.machine = new SimulatedMachine(options.clock);
    if (options.isPlugged ?? true) this.#far = this.#attach({ announced: false });
  }

  /** The port object that is good now. Throws while the adapter is out. */
  get port(): SimulatedSerialPort {
    const port = this.#far && this.machine.portOf(this.#far);
    if (!port) throw new Error("The adapter is unplugged.");
    return port;
  }

  /** Pulls the adapter, whatever the stream does. */
  unplug(order?: UnplugOrder): void {
    const far = this.#far;
    if (!far) return;
    this.#far = null;
    this.machine.detach(far, order);
  }

  /** Plugs an adapter in: a new port object. */
  plugIn(how: AttachHow = {}): SimulatedFarEnd {
    this.#far ??= this.#attach(how);
    return this.#far;
  }

  #attach(how: AttachHow): SimulatedFarEnd {
    const far = this.machine.attach(
      {
        identity: this.#options.identity,
        osBufferBytes: OS_BUFFER_BYTES,
        linesOnOpen: { dataTerminalReady: true, requestToSend: true },
        prepareOpen: async (options) => {
          this.#next = await this.#options.connect(options);
          return true;
        },
      },
      how,
    );
    far.onOpenChange = (isOpen) => {
      if (isOpen && this.#next) this.#run(far, this.#next);
    };
    return far;
  }

  /** Moves bytes both ways until either side ends. */
  #run(far: SimulatedFarEnd, duplex: ByteDuplex): void {
    let isOver = false;
    const end = (): void => {
      if (isOver) return;
      isOver = true;
      duplex.destroy();
    };
    far.onOpenChange = (isOpen) => {
      if (isOpen && this.#next) this.#run(far, this.#next);
      else end();
    };
    const goAway = (): void => {
      if (isOver) return;
      end();
      if (this.#far === far) this.unplug();
    };
    duplex.on("error", goAway);
    duplex.on("close", goAway);
    let unread = 0;
    duplex.on("data", (bytes) => {
      if (isOver) return;
      unread += bytes.length;
      if (unread > PAUSE_BYTES) duplex.pause();
      // A refusal says that the host threw the bytes away: that is its right.
      const taken = far.send(bytes).catch(() => undefined);
      void taken.then(() => {
        unread -= bytes.length;
        if (unread <= PAUSE_BYTES) duplex.resume();
      });
    });
    void this.#forward(far, duplex, () => isOver, goAway);
  }

  async #forward(far: SimulatedFarEnd, duplex: ByteDuplex, isOver: () => boolean, goAway: () => void): Promise<void> {
    while (!isOver()) {
      const { value } = await far.receive();
      if (isOver()) return;
      if (!value) continue;
      const error = await new Promise<Error | null | undefined>((resolve) => duplex.write(value, resolve));
      if (error) goAway();
    }
  }
}
