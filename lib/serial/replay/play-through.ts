import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { Recording } from "@/lib/serial/recording";
import { createExchanger } from "@/lib/serial/session/exchanger";
import { createLink } from "@/lib/serial/session/link";
import { createWireLog } from "@/lib/serial/wire-log";
import { sameBytes } from "./driver-words";
import type { ComparedExchange, RecordingComparison } from "./compare-recording";
import { createReplayPort } from "./replay-port";
import type { ReplayDifference } from "./replay-device";

/** How many later requests are looked at for the same one asked again. */
const ASKED_AGAIN_WITHIN = 16;
const LOG_ENTRIES = 64;

export type PlayThrough =
  | { readonly kind: "played"; readonly exchanges: number }
  | { readonly kind: "differs"; readonly difference: ReplayDifference }
  /** The line itself ended, or an answer was missed. */
  | { readonly kind: "stopped"; readonly exchange: number; readonly message: string };

/** The queue itself asks again after silence and after "busy", so the caller must not. */
function isAskedAgain(exchange: ComparedExchange, following: readonly ComparedExchange[]): boolean {
  const unsettled = exchange.answer === null || exchange.answer.kind === "busy";
  return unsettled && exchange.request?.idempotent === true && following.some(({ bytes }) => sameBytes(bytes, exchange.bytes));
}

/**
 * Plays a recording through the real line and queue of a session: every request leaves as a session sends it, every answer is
 * matched as a session matches it.
 * @param compared of the same driver and recording, without differences
 */
export async function playThrough(driver: CompiledDriver, recording: Recording, compared: RecordingComparison, clock: Clock): Promise<PlayThrough> {
  const { transport } = driver.definition;
  const { port, device } = createReplayPort(recording, { clock, transport, pace: "recorded" });
  const wanted = compared.exchanges.filter((one, index) => !isAskedAgain(one, compared.exchanges.slice(index + 1, index + 1 + ASKED_AGAIN_WITHIN)));
  await port.open({ ...transport, bufferSize: 16_384 });
  let lost: string | null = null;
  const lose = (cause: string) => {
    lost = cause;
    exchanger.end({ code: "lost", message: cause });
  };
  const exchanger = createExchanger({
    driver, clock, wireLog: createWireLog({ clock, maxEntries: LOG_ENTRIES }), send: (bytes) => link.send(bytes), onHopeless: lose, onUnasked: () => undefined,
  });
  const link = createLink(port, clock, { onBytes: exchanger.onBytes, onGlitch: () => undefined, onLost: lose });
  let next = 0;
  let stopped: { readonly exchange: number; readonly message: string } | null = null;

  async function worker(): Promise<void> {
    for (let one = wanted[next]; one && stopped === null && lost === null; one = wanted[next]) {
      next += 1;
      if (!one.request) continue;
      const result = await exchanger.submit(one.request);
      const answered = result.ok || result.error.code === "refused" || result.error.code === "busy" || (one.answer === null && result.error.code === "timeout");
      if (!answered && !result.ok) stopped ??= { exchange: one.number, message: result.error.message };
    }
  }
  await Promise.all(Array.from({ length: driver.definition.pace.inFlight + 1 }, worker));
  exchanger.end({ code: "lost", message: "The recording is over." });
  await link.close();
  if (device.outcome.kind === "differs") return device.outcome;
  return stopped ? { kind: "stopped", ...(stopped as { exchange: number; message: string }) } : { kind: "played", exchanges: device.exchangesDone };
}
