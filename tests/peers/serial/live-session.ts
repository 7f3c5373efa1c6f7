import type { Clock } from "@/lib/serial/clock";
import { createRealClock } from "@/lib/serial/clock/real-clock";
import { compileDriver } from "@/lib/serial/driver/compile";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { shippedDriver } from "@/lib/serial/drivers/shipped";
import { DuplexPort } from "@/lib/serial/node/duplex-port";
import type { ByteDuplex } from "@/lib/serial/node/duplex-port";
import type { SerialOpenOptions } from "@/lib/serial/port";
import { openSession } from "@/lib/serial/session/open-session";
import type { OpenedSession } from "@/lib/serial/session/open-session";
import { createWireLog } from "@/lib/serial/wire-log";

export function compiled(slug: string): CompiledDriver {
  const result = compileDriver(shippedDriver(slug));
  if (!result.ok) throw new Error(JSON.stringify(result.error));
  return result.value;
}

/** Opens a session over a real byte stream, runs `body` with it, and closes it. */
export async function withSession<T>(
  driver: CompiledDriver,
  connect: (options: SerialOpenOptions) => Promise<ByteDuplex>,
  body: (opened: OpenedSession, adapter: DuplexPort) => Promise<T>,
  clock: Clock = createRealClock(),
): Promise<T> {
  const adapter = new DuplexPort({ clock, connect });
  const opened = await openSession({ port: adapter.port, driver, clock, wireLog: createWireLog({ clock }) });
  if (!opened.ok) throw new Error(JSON.stringify(opened.error));
  try {
    return await body(opened.value, adapter);
  } finally {
    await opened.value.session.close();
  }
}
