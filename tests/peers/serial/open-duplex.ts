import { connect } from "node:net";
import { SerialPort } from "serialport";
import type { SerialOpenOptions } from "@/lib/serial/port";
import type { ByteDuplex } from "@/lib/serial/node/duplex-port";

/** Connects to raw bytes over TCP. */
export function connectTcp(host: string, port: number): Promise<ByteDuplex> {
  return new Promise((resolve, reject) => {
    const socket = connect({ host, port, noDelay: true });
    socket.once("error", reject);
    socket.once("connect", () => {
      socket.off("error", reject);
      resolve(socket);
    });
  });
}

/** Opens a serial device or a pseudo-terminal through the package `serialport`. Its `close` comes when the port is let go of. */
export function connectSerial(path: string, options: SerialOpenOptions): Promise<ByteDuplex> {
  const { baudRate, dataBits, stopBits, parity, flowControl } = options;
  return new Promise((resolve, reject) => {
    const serial = new SerialPort({
      path,
      baudRate,
      dataBits,
      stopBits,
      parity,
      rtscts: flowControl === "hardware",
      autoOpen: false,
    });
    // Its own `destroy` ends the stream and leaves the port open.
    const destroy = () => serial.close(() => undefined);
    serial.open((error) => (error ? reject(error) : resolve(Object.assign(serial, { destroy }))));
  });
}
