import type { Clock } from "@/lib/serial/clock";
import type { SerialOpenOptions, SerialPortIdentity } from "@/lib/serial/port";
import { ByteQueue } from "./byte-queue";
import type { DeviceModel } from "./device-model-interface";
import type { SimulatedFarEnd, UnplugOrder } from "./far-end";
import type { SimulatedSerialPort } from "./simulated-port";
import { SimulatedMachine } from "./simulated-serial";
import type { SimulatedSerial } from "./simulated-serial";
import { characterMs } from "@/lib/serial/protocols/character-time";
import { PacedLine } from "./wire";
import type { WireEvent, WireFault } from "./wire-fault";

/** How a device hangs on a simulated port. */
export type SimulatedDeviceOptions = {
  readonly model: DeviceModel;
  /** The device's own line settings: a host that opens with other ones gets and sends garbage, as on a real line. */
  readonly transport: SerialOpenOptions;
  readonly clock: Clock;
  /**
   * The time of the device, as its model has it, and of its line; `clock` by default. The port itself stays with `clock`: it
   * promises later tasks, which a timeline does not.
   */
  readonly timeline?: Clock;
  /** `wire`: bytes take characters × bits / baud. `none`: they arrive at once. */
  readonly pacing: "wire" | "none";
  readonly identity?: SerialPortIdentity;
  /** Bytes that the system holds each way; 4096 as in Linux's tty layer. */
  readonly osBufferBytes?: number;
  /** Whether the system tells of lost bytes (Windows) or not (POSIX). */
  readonly reportsOverrun?: boolean;
  /** The device restarts when DTR goes on, as boards with a reset circuit do. */
  readonly restartsOnDtr?: boolean;
  readonly fault?: WireFault;
  /** See `LineOptions`: how long due bytes may wait for those behind them, so that they come together. */
  readonly grainMs?: number;
};

/** What a device has said and not yet sent; more is lost, as in any transmitter that nobody holds back. */
const DEVICE_BUFFER_BYTES = 65_536;
const OS_BUFFER_BYTES = 4096;

/**
 * One simulated device on one simulated adapter, already granted to the page.
 *
 * The device keeps its memory and its power when the plug is pulled; only the adapter goes.
 */
export class SimulatedDevicePort {
  readonly machine: SimulatedMachine;
  readonly #options: SimulatedDeviceOptions;
  readonly #deviceOut = new ByteQueue();
  readonly #toDevice: PacedLine;
  readonly #toHost: PacedLine;
  #far: SimulatedFarEnd | null = null;
  #port: SimulatedSerialPort;
  #fault: WireFault | null;

  constructor(options: SimulatedDeviceOptions) {
    this.#options = options;
    this.#fault = options.fault ?? null;
    this.machine = new SimulatedMachine(options.clock);
    const shared = {
      clock: options.timeline ?? options.clock,
      grainMs: options.grainMs ?? 0,
      fault: () => this.#fault,
      onEvent: (event: WireEvent) => this.#happen(event),
    };
    const outOf = (): SimulatedFarEnd["transmitLine"] | undefined => this.#far?.transmitLine;
    this.#toDevice = new PacedLine({
      ...shared,
      direction: "host-to-device",
      source: {
        get available() {
          return outOf()?.available ?? 0;
        },
        takeByte: () => outOf()?.takeByte(),
      },
      deliver: (bytes) => options.model.receive(this.#throughSettings(bytes)),
    });
    this.#toHost = new PacedLine({
      ...shared,
      direction: "device-to-host",
      source: {
        get available() {
          return queue.length;
        },
        takeByte: () => queue.takeByte(),
      },
      deliver: (bytes) => this.#far?.blast(this.#throughSettings(bytes)),
    });
    const queue = this.#deviceOut;
    const perCharacterMs = options.pacing === "wire" ? characterMs(options.transport) : 0;
    this.#toDevice.setPace(perCharacterMs);
    this.#toHost.setPace(perCharacterMs);
    options.model.attach((bytes) => this.#say(bytes));
    this.#port = this.#plugIn(false);
  }

  /** Stands for `navigator.serial`. */
  get serial(): SimulatedSerial {
    return this.machine.serial;
  }

  /** The port object that is good now, or was until the plug was pulled. */
  get port(): SimulatedSerialPort {
    return this.#port;
  }

  /** The system's side of the adapter; null while it is unplugged. */
  get far(): SimulatedFarEnd | null {
    return this.#far;
  }

  /** Bytes that went over the line, each way, since the beginning. */
  get counts(): { readonly hostToDeviceBytes: number; readonly deviceToHostBytes: number } {
    return { hostToDeviceBytes: this.#toDevice.byteCount, deviceToHostBytes: this.#toHost.byteCount };
  }

  /** Sets what goes wrong on the line; null: nothing. */
  setFault(fault: WireFault | null): void {
    this.#fault = fault;
  }

  /** Lets lines that a fault has stalled go on. */
  release(): void {
    this.#toDevice.release();
    this.#toHost.release();
  }

  /** Pulls the plug: open streams fail as lost and `disconnect` fires, in the order asked for. */
  unplug(order: UnplugOrder = "stream-first"): void {
    const far = this.#far;
    if (!far) return;
    this.#far = null;
    this.#toDevice.stop();
    this.#toHost.stop();
    this.#deviceOut.clear();
    far.transmitLine.onAvailable = null;
    far.onOutputSignals = null;
    this.machine.detach(far, order);
  }

  /** Plugs the adapter in again. @returns the new port object; `connect` fires at it and bubbles to `serial` */
  replug(): SimulatedSerialPort {
    if (!this.#far) this.#port = this.#plugIn(true);
    return this.#port;
  }

  #plugIn(announced: boolean): SimulatedSerialPort {
    const far = this.machine.attach(
      {
        identity: this.#options.identity,
        osBufferBytes: this.#options.osBufferBytes ?? OS_BUFFER_BYTES,
        reportsOverrun: this.#options.reportsOverrun ?? false,
        linesOnOpen: { dataTerminalReady: true, requestToSend: true },
      },
      { announced },
    );
    far.setInputSignals({ dataCarrierDetect: true, clearToSend: true, ringIndicator: false, dataSetReady: true });
    far.transmitLine.onAvailable = () => this.#toDevice.wake();
    let hadDtr = false;
    far.onOutputSignals = ({ dataTerminalReady }) => {
      if (this.#options.restartsOnDtr && dataTerminalReady && !hadDtr) this.#options.model.restart();
      hadDtr = dataTerminalReady;
    };
    this.#far = far;
    const port = this.machine.portOf(far);
    if (!port) throw new Error("An adapter that was just plugged in has a port.");
    return port;
  }

  #say(bytes: Uint8Array): void {
    if (!this.#far || this.#deviceOut.length + bytes.length > DEVICE_BUFFER_BYTES) return;
    this.#deviceOut.push(bytes);
    this.#toHost.wake();
  }

  #happen(event: WireEvent): void {
    if (event.kind === "unplug") this.unplug(event.order);
    else if (event.kind === "read-error") this.#far?.faultOnRead(event.fault);
    else if (event.kind === "write-error") this.#far?.faultOnWrite(event.fault);
    else {
      // What a device was about to say dies with it.
      this.#deviceOut.clear();
      this.#options.model.restart();
    }
  }

  /** Bytes sampled at another rate or with other bits are other bytes; which ones does not matter, that they repeat does. */
  #throughSettings(bytes: Uint8Array): Uint8Array {
    const { transport } = this.#options;
    const host = this.#far?.openOptions;
    if (!host) return bytes;
    const same =
      host.baudRate === transport.baudRate &&
      host.dataBits === (transport.dataBits ?? 8) &&
      host.stopBits === (transport.stopBits ?? 1) &&
      host.parity === (transport.parity ?? "none");
    return same ? bytes : bytes.map((byte) => (byte * 167 + 13) & 0xff);
  }
}

/** Puts `model` on a simulated port. */
export function createSimulatedDevicePort(options: SimulatedDeviceOptions): SimulatedDevicePort {
  return new SimulatedDevicePort(options);
}
