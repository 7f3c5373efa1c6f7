/**
 * A serial port as the W3C Web Serial interface `SerialPort` shows it, stated by structure:
 * `navigator.serial`'s ports, the simulated port, a TCP stream and a PTY all fit, and nothing here needs a browser.
 * Source: WICG/serial, "SerialPort interface".
 */
export type SerialParity = "none" | "even" | "odd";
export type SerialFlowControl = "none" | "hardware";

export type SerialOpenOptions = {
  readonly baudRate: number;
  readonly dataBits?: 7 | 8 | undefined;
  readonly stopBits?: 1 | 2 | undefined;
  readonly parity?: SerialParity | undefined;
  /** Bytes the browser holds each way; 255 where it is not given, at most 16 MiB. */
  readonly bufferSize?: number | undefined;
  readonly flowControl?: SerialFlowControl | undefined;
};

/** Lines the host drives. What is left out stays as it is. */
export type SerialOutputLines = {
  readonly dataTerminalReady?: boolean | undefined;
  readonly requestToSend?: boolean | undefined;
  readonly break?: boolean | undefined;
};

/** Lines the device drives. */
export type SerialInputLines = {
  readonly dataCarrierDetect: boolean;
  readonly clearToSend: boolean;
  readonly ringIndicator: boolean;
  readonly dataSetReady: boolean;
};

export type SerialPortIdentity = {
  readonly usbVendorId?: number | undefined;
  readonly usbProductId?: number | undefined;
};

export interface SerialPortLike {
  /** The device is there. It says nothing of open or closed. */
  readonly connected: boolean;
  /** Null unless open; a new stream after a recoverable error; null for good once the device is lost. */
  readonly readable: ReadableStream<Uint8Array> | null;
  readonly writable: WritableStream<Uint8Array> | null;
  /** Rejects TypeError (options), InvalidStateError (not closed), NetworkError (the system refuses, one message for all causes). */
  open(options: SerialOpenOptions): Promise<void>;
  /** Rejects TypeError while a stream is locked (the port stays open), InvalidStateError when not open. Discards unsent bytes. */
  close(): Promise<void>;
  getInfo(): SerialPortIdentity;
  getSignals(): Promise<SerialInputLines>;
  setSignals(signals: SerialOutputLines): Promise<void>;
  forget(): Promise<void>;
  addEventListener(type: "connect" | "disconnect", listener: (event: Event) => void): void;
  removeEventListener(type: "connect" | "disconnect", listener: (event: Event) => void): void;
}

/** What gives ports: `navigator.serial`, or the simulated one. After a replug the port is a new object, found here. */
export interface SerialLike {
  getPorts(): Promise<SerialPortLike[]>;
  requestPort(options?: { readonly filters?: SerialPortIdentity[] }): Promise<SerialPortLike>;
  addEventListener(type: "connect" | "disconnect", listener: (event: Event) => void): void;
  removeEventListener(type: "connect" | "disconnect", listener: (event: Event) => void): void;
}
