/**
 * The server process. Next answers; this only states who is asking: it appends the peer's address to
 * `x-forwarded-for` as a proxy would, and drops what a client may not say about itself when no proxy stands before it.
 */
import { createServer } from "node:http";

process.env.NODE_ENV ??= "production";
// Read after the line above: Next looks at it when it is loaded.
const { default: next } = await import("next");

const port = Number(process.env.PORT ?? "3000");
const hostname = "127.0.0.1";
const proxyHops = Number(process.env.PROXY_HOPS ?? "0");

const app = next({ dev: false, hostname, port, dir: import.meta.dirname.replace(/\/scripts$/, "") });
await app.prepare();
const handle = app.getRequestHandler();

const server = createServer((request, response) => {
  const peer = request.socket.remoteAddress ?? "";
  const stated = proxyHops > 0 ? request.headers["x-forwarded-for"] : undefined;
  request.headers["x-forwarded-for"] = [stated ?? [], peer].flat().join(", ");
  if (proxyHops === 0) {
    delete request.headers["x-forwarded-host"];
    delete request.headers["x-forwarded-proto"];
  }
  void handle(request, response);
});

server.on("error", (error) => {
  const busy = error.code === "EADDRINUSE";
  process.stderr.write(busy ? `Port ${port} is taken. Choose another: PORT=3001 npm start\n` : `${error.stack}\n`);
  process.exit(1);
});
server.listen(port, hostname);

for (const name of ["SIGINT", "SIGTERM"]) {
  process.on(name, () => {
    server.close(() => process.exit(0));
    server.closeAllConnections();
  });
}
