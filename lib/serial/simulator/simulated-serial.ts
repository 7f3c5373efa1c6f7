import type { Clock } from "@/lib/serial/clock";
import type { SerialLike, SerialPortIdentity, SerialPortLike } from "@/lib/serial/port";
import { EventTree } from "./event-tree";
import type { FarEndOptions, UnplugOrder } from "./far-end";
import { SimulatedFarEnd } from "./far-end";
import { SimulatedSerialPort } from "./simulated-port";

type Plugged = {
  readonly far: SimulatedFarEnd;
  connected: boolean;
  granted: boolean;
  port: SimulatedSerialPort | null;
};
export type AttachHow = {
  /** Whether the user has let the page use it already; true by default. */
  readonly granted?: boolean;
  /** Whether the page is told; false for what was there before the page. */
  readonly announced?: boolean;
};

type RequestOptions = { readonly filters?: readonly SerialPortIdentity[] };

/** What stands behind a simulated `serial`: the adapters, and the user. */
type System = {
  readonly list: () => Promise<SerialPortLike[]>;
  readonly request: (options: RequestOptions) => Promise<SerialPortLike>;
};

/** Stands for `navigator.serial`. Source: WICG/serial, "Serial interface". */
export class SimulatedSerial extends EventTree implements SerialLike {
  static {
    // Pages and tests ask for the interface's name, which a bundler may have changed.
    Object.defineProperty(this, "name", { value: "Serial" });
  }

  readonly #system: System;

  constructor(system: System) {
    super(null);
    this.#system = system;
  }

  get onconnect(): ((event: Event) => void) | null {
    return this.handlerOf("connect");
  }

  set onconnect(handler: ((event: Event) => void) | null) {
    this.setHandler("connect", handler);
  }

  get ondisconnect(): ((event: Event) => void) | null {
    return this.handlerOf("disconnect");
  }

  set ondisconnect(handler: ((event: Event) => void) | null) {
    this.setHandler("disconnect", handler);
  }

  getPorts(): Promise<SerialPortLike[]> {
    return this.#system.list();
  }

  requestPort(options: RequestOptions = {}): Promise<SerialPortLike> {
    return this.#system.request(options);
  }
}

function checkFilters(filters: readonly SerialPortIdentity[]): void {
  for (const filter of filters) {
    if (filter.usbVendorId !== undefined) continue;
    throw new TypeError(
      filter.usbProductId === undefined
        ? "A filter cannot be empty."
        : "A filter with a product ID must have a vendor ID.",
    );
  }
}

function matches(identity: SerialPortIdentity, filter: SerialPortIdentity): boolean {
  return (
    filter.usbVendorId === identity.usbVendorId &&
    (filter.usbProductId === undefined || filter.usbProductId === identity.usbProductId)
  );
}

/** The machine with its adapters and the user before it: what a test or a simulated device drives. */
export class SimulatedMachine {
  readonly serial: SimulatedSerial;
  readonly #clock: Clock;
  #plugged: Plugged[] = [];
  #choice: SimulatedFarEnd | null = null;
  #activated = false;
  /** Moves with `reset`, so that what was about to be told is not told. */
  #generation = 0;

  constructor(clock: Clock) {
    this.#clock = clock;
    this.serial = new SimulatedSerial({ list: () => this.#list(), request: (options) => this.#request(options) });
  }

  /** Plugs an adapter in. `connect` fires in a later task, if the page may see it and it is news. */
  attach(options: FarEndOptions = {}, how: AttachHow = {}): SimulatedFarEnd {
    const far = new SimulatedFarEnd(this.#clock, options);
    const plugged: Plugged = { far, connected: options.connected ?? true, granted: how.granted ?? true, port: null };
    this.#plugged.push(plugged);
    if (plugged.connected && (how.announced ?? true)) this.#task(() => this.#tell(plugged, true));
    return far;
  }

  /** Pulls an adapter: gone from `getPorts()` at once, `disconnect` fires and open streams fail as lost, in the order asked for. */
  detach(far: SimulatedFarEnd, order: UnplugOrder = "stream-first"): void {
    const plugged = this.#plugged.find((each) => each.far === far);
    if (!plugged) return;
    this.#plugged = this.#plugged.filter((each) => each !== plugged);
    if (this.#choice === far) this.#choice = null;
    if (order !== "event-first") far.vanish(order);
    this.#task(() => this.#tell(plugged, false));
    if (order === "event-first") this.#task(() => far.vanish(order));
  }

  /** A wireless link goes or comes: only the event, the port stays listed. */
  setConnected(far: SimulatedFarEnd, connected: boolean): void {
    const plugged = this.#plugged.find((each) => each.far === far);
    if (!plugged || plugged.connected === connected) return;
    plugged.connected = connected;
    this.#task(() => this.#tell(plugged, connected));
  }

  /** What the user will pick in the chooser; null: closes it. */
  choose(far: SimulatedFarEnd | null): void {
    this.#choice = far;
  }

  /** The page has transient activation from now on. */
  userGesture(): void {
    this.#activated = true;
  }

  /** Forgets every adapter, choice and activation, without a word to the page. */
  reset(): void {
    this.#plugged = [];
    this.#choice = null;
    this.#activated = false;
    this.#generation += 1;
  }

  /** The port object of an adapter, the same while it is plugged in. */
  portOf(far: SimulatedFarEnd): SimulatedSerialPort | null {
    const plugged = this.#plugged.find((each) => each.far === far);
    return plugged ? this.#portOf(plugged) : null;
  }

  async #list(): Promise<SerialPortLike[]> {
    await this.#turn();
    return this.#plugged.filter((each) => each.granted).map((each) => this.#portOf(each));
  }

  async #request(options: RequestOptions): Promise<SerialPortLike> {
    if (!this.#activated)
      throw new DOMException("Must be handling a user gesture to show a permission request.", "SecurityError");
    const filters = [...(options.filters ?? [])];
    checkFilters(filters);
    await this.#turn();
    const chosen = this.#plugged.find((each) => each.far === this.#choice);
    const listed = chosen && (filters.length === 0 || filters.some((filter) => matches(chosen.far.identity, filter)));
    if (!chosen || !listed) throw new DOMException("No port selected by the user.", "NotFoundError");
    chosen.granted = true;
    return this.#portOf(chosen);
  }

  #portOf(plugged: Plugged): SimulatedSerialPort {
    plugged.port ??= new SimulatedSerialPort(
      plugged.far,
      { tree: this.serial, forget: (far) => this.#forget(far) },
      plugged.connected,
    );
    return plugged.port;
  }

  /** The grant is over; a port that is granted anew is a new object. */
  #forget(far: SimulatedFarEnd): void {
    const plugged = this.#plugged.find((each) => each.far === far);
    if (!plugged) return;
    plugged.granted = false;
    plugged.port = null;
  }

  #tell(plugged: Plugged, connected: boolean): void {
    if (!plugged.granted) return;
    SimulatedSerialPort.tell(this.#portOf(plugged), connected);
  }

  #task(fire: () => void): void {
    const generation = this.#generation;
    this.#clock.after(0, () => {
      if (generation === this.#generation) fire();
    });
  }

  #turn(): Promise<void> {
    return new Promise((resolve) => this.#clock.after(0, resolve));
  }
}
