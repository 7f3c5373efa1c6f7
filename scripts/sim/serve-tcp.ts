import { createServer } from "node:net";
import type { Socket } from "node:net";
import type { Served, ServedDevice } from "./served-device";
import { UNREAD_BYTES } from "./served-device";

/** Splits `host:port`, the host in square brackets where it is an IPv6 address. Port 0: any free one. Null: neither. */
export function parseAddress(text: string): { readonly host: string; readonly port: number } | null {
  const match = /^(?:\[(?<six>[0-9a-f:]+)\]|(?<name>[^:]+)):(?<port>\d{1,5})$/iu.exec(text);
  const port = Number(match?.groups?.port);
  const host = match?.groups?.six ?? match?.groups?.name;
  return host !== undefined && port <= 65_535 ? { host, port } : null;
}

/** Puts the device on raw TCP. A line has one host: who connects last has it, so that a connection that died unseen blocks nobody. */
export function serveTcp(device: ServedDevice, host: string, port: number): Promise<Served> {
  let current: Socket | null = null;
  const server = createServer({ noDelay: true }, (socket) => {
    current?.destroy();
    current = socket;
    device.wire.hangUp();
    device.onBytes = (bytes) => {
      if (socket.writableLength < UNREAD_BYTES) socket.write(bytes);
    };
    socket.on("data", (bytes) => {
      if (current !== socket || device.wire.hear(bytes)) return;
      socket.pause();
      device.wire.whenRoom(() => socket.resume());
    });
    // `close` follows and says all there is to say.
    socket.on("error", () => undefined);
    socket.on("close", () => {
      if (current !== socket) return;
      current = null;
      device.onBytes = () => undefined;
      device.wire.hangUp();
    });
  });
  const stop = (): Promise<void> =>
    new Promise((resolve) => {
      server.close(() => resolve());
      current?.destroy();
    });
  return new Promise((resolve, reject) => {
    server.once("error", reject);
    server.listen(port, host, () => {
      const address = server.address();
      const bound = typeof address === "object" && address ? address.port : port;
      resolve({ where: `tcp ${host.includes(":") ? `[${host}]` : host}:${bound}`, stop });
    });
  });
}
