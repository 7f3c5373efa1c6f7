import type { CompiledDriver, Frame, Match, WireRequest } from "@/lib/serial/driver/compiled";
import type { NativeValues } from "@/lib/serial/native";
import type { Recording } from "@/lib/serial/recording";
import { hexOf } from "@/lib/serial/wire-log";
import { commonStart, createDriverWords, sameBytes } from "./driver-words";

/** Differences that are told; a driver for another device differs everywhere. */
export const MAX_DIFFERENCES = 20;
/** Requests that may be under way at once: the most that a driver can state. A request older than that has no answer. */
const MAX_UNDER_WAY = 16;

/** Where a driver and a recording part. Exchanges count from 1, bytes from 0, lines as in the recording's file. */
export type RecordingDifference = {
  /** `says`: the driver sends other bytes. `reads`: it cannot read what was answered. */
  readonly kind: "says" | "reads";
  readonly exchange: number;
  readonly line: number;
  readonly offset: number;
  /** The byte of the recording and the driver's; null where it has ended. */
  readonly expected: number | null;
  readonly got: number | null;
  /** The whole request or reply as recorded, and the request as the driver would send it, as hex pairs. */
  readonly recorded: string;
  readonly driver: string;
  readonly message: string;
};

/** One request of a recording: what the driver makes of it, and what was answered. */
export type ComparedExchange = {
  readonly number: number;
  readonly line: number;
  readonly bytes: Uint8Array;
  /** What the driver would send; the very bytes recorded where `same`. */
  readonly request: WireRequest | null;
  readonly same: boolean;
  /** How the driver reads the answer. Null: there is none. */
  answer: Exclude<Match, { kind: "other" }> | null;
  /** Line of the recording that the answer stands in. */
  answerLine: number | null;
};

export type RecordingComparison = {
  readonly exchanges: readonly ComparedExchange[];
  readonly differences: readonly RecordingDifference[];
  /** Requests that nothing answers: lost on the line, or asked again. */
  readonly unanswered: number;
  /** Frames that answer nothing: chatter of a start, another program's words. */
  readonly unasked: number;
  /** All values that the driver reads out of it; a later one takes the place of an earlier. */
  readonly values: NativeValues;
};

type Waiting = { readonly exchange: ComparedExchange; strange: { readonly line: number; readonly bytes: Uint8Array } | null };

function saysDifference({ number, line, bytes, request }: ComparedExchange): RecordingDifference {
  const offset = request ? commonStart(bytes, request.bytes) : 0;
  return {
    kind: "says", exchange: number, line, offset, expected: bytes[offset] ?? null, got: request?.bytes[offset] ?? null,
    recorded: hexOf(bytes), driver: request ? hexOf(request.bytes) : "",
    message: request ? `Request ${number} differs from byte ${offset} on: the driver would send “${request.label}”.` : `Request ${number}: the driver has no request at all.`,
  };
}

function readsDifference({ number, request }: ComparedExchange, line: number, bytes: Uint8Array, why: string): RecordingDifference {
  return { kind: "reads", exchange: number, line, offset: 0, expected: bytes[0] ?? null, got: null, recorded: hexOf(bytes), driver: request ? hexOf(request.bytes) : "", message: `Exchange ${number}: ${why}` };
}

/**
 * Compares a recording with what a driver would send and how it would read the answers, without a clock.
 *
 * Time is linear in the recording's bytes for what the driver understands; only `MAX_DIFFERENCES` requests are looked up among all
 * that it knows, then it ends.
 */
export function compareRecording(driver: CompiledDriver, { lines }: Recording): RecordingComparison {
  const words = createDriverWords(driver);
  const decoder = driver.codec.createDecoder();
  const exchanges: ComparedExchange[] = [];
  const differences: RecordingDifference[] = [];
  const values: Record<string, NativeValues[string]> = {};
  let waiting: Waiting[] = [];
  let unanswered = 0;
  let unasked = 0;

  function giveUp({ exchange, strange }: Waiting): void {
    unanswered += 1;
    if (strange && exchange.same) differences.push(readsDifference(exchange, strange.line, strange.bytes, "the driver reads no answer in what came."));
  }

  function settle(found: Waiting, match: ComparedExchange["answer"], line: number, frame: Frame): void {
    waiting = waiting.filter((one) => one !== found);
    found.exchange.answer = match;
    found.exchange.answerLine = line;
    if (match?.kind === "malformed") differences.push(readsDifference(found.exchange, line, frame.bytes, match.message));
    if (match?.kind === "reply") Object.assign(values, match.values);
  }

  function takeFrame(frame: Frame, line: number): void {
    for (const one of waiting) {
      const match = one.exchange.request?.match(frame) ?? { kind: "other" };
      if (match.kind !== "other") return settle(one, match, line, frame);
    }
    const [oldest] = waiting;
    if (oldest?.exchange.request && driver.codec.isEcho(frame, oldest.exchange.request)) return;
    unasked += 1;
    if (oldest) oldest.strange ??= { line, bytes: frame.bytes };
  }

  function ask(bytes: Uint8Array, line: number): void {
    if (waiting.length === 0 || driver.codec.kind === "modbus-rtu") decoder.flush();
    const request = words.requestFor(bytes);
    const exchange: ComparedExchange = { number: exchanges.length + 1, line, bytes, request, same: request !== null && sameBytes(request.bytes, bytes), answer: null, answerLine: null };
    exchanges.push(exchange);
    if (!exchange.same) differences.push(saysDifference(exchange));
    waiting.push({ exchange, strange: null });
    const [oldest] = waiting;
    if (oldest && waiting.length > MAX_UNDER_WAY) {
      waiting = waiting.slice(1);
      giveUp(oldest);
    }
  }

  for (const [index, entry] of lines.entries()) {
    if (differences.length >= MAX_DIFFERENCES) break;
    // The head is the file's first line.
    const line = index + 2;
    if (entry.direction === "out") ask(entry.bytes, line);
    else if (entry.direction === "in") for (const frame of decoder.push(entry.bytes)) takeFrame(frame, line);
  }
  waiting.forEach(giveUp);
  return { exchanges, differences: differences.slice(0, MAX_DIFFERENCES), unanswered, unasked, values };
}
