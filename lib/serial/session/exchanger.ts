import { fail, ok, type Result } from "@/lib/result";
import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver, Fields, Frame, Match, WireRequest } from "@/lib/serial/driver/compiled";
import type { NativeValues } from "@/lib/serial/native";
import { characterMs } from "@/lib/serial/protocols/character-time";
import type { WireLog } from "@/lib/serial/wire-log";
import { afterPatiently } from "./patient-timer";
import { createQuarantine } from "./quarantine";
import type { RequestError } from "./types";

/** Requests that may wait; more is a caller that does not wait for its answers. */
export const MAX_QUEUED = 256;
/** A line that does not fall silent for so many quiet times in a row is given up. */
const MAX_DRAINS = 40;
/** First pause after a busy answer; it doubles with each. */
const BUSY_PAUSE_MS = 20;

export type Reply = { readonly values: NativeValues; readonly fields: Fields };
export type ExchangeResult = Result<Reply, RequestError>;

type Job = {
  readonly request: WireRequest;
  readonly settle: (result: ExchangeResult) => void;
  retriesLeft: number;
  /** It was sent before and its answer given up: two answers may come. */
  sentAgain: boolean;
  busyLeft: number;
  /** Number in the wire log while it is in flight. */
  logged: number;
  cancelDeadline: () => void;
};

export interface Exchanger {
  /** Sends a request when its turn comes. Settles exactly once, at the latest when the session ends. */
  submit(request: WireRequest, signal?: AbortSignal): Promise<ExchangeResult>;
  onBytes(bytes: Uint8Array): void;
  /** Holds the line until it was silent for `quietMs`, `atMostMs` at most. */
  drain(quietMs: number, atMostMs: number): void;
  /** Resolves when the line is not being drained. */
  whenQuiet(): Promise<void>;
  /** Ends everything that waits with this error; later requests end so too. */
  end(error: RequestError): void;
}

export type ExchangerParts = {
  readonly driver: CompiledDriver;
  readonly clock: Clock;
  readonly wireLog: WireLog;
  readonly send: (bytes: Uint8Array) => void;
  /** The line never fell silent. */
  readonly onHopeless: (cause: string) => void;
  /** A frame that nobody asked for. */
  readonly onUnasked: (frame: Frame) => void;
};

/**
 * One queue in front of one line: deadlines, retries, as many in flight as the driver allows, correlation by what a reply names.
 *
 * After a timeout or an abort the line is held until it falls silent, so that no late reply meets a later request.
 */
export function createExchanger({ driver, clock, wireLog, send, onHopeless, onUnasked }: ExchangerParts): Exchanger {
  const { pace, transport } = driver.definition;
  const { codec } = driver;
  const decoder = codec.createDecoder();
  const queue: Job[] = [];
  const inFlight: Job[] = [];
  /** Jobs that were told "busy" and pause. */
  const resting = new Map<Job, () => void>();
  let ended: RequestError | null = null;
  let lastActivityMs = -Infinity;
  let cancelGap: (() => void) | null = null;

  const perCharacterMs = characterMs(transport);
  const wireMs = ({ bytes, replyBytes, extraMs }: WireRequest) => (bytes.length + replyBytes) * perCharacterMs + pace.workMs + extraMs;

  function withdraw(job: Job): boolean {
    job.cancelDeadline();
    for (const list of [queue, inFlight]) {
      const index = list.indexOf(job);
      if (index !== -1) list.splice(index, 1);
      if (index !== -1 && list === inFlight) return true;
    }
    resting.get(job)?.();
    resting.delete(job);
    return false;
  }

  function settle(job: Job, result: ExchangeResult): void {
    withdraw(job);
    job.settle(result);
  }

  /** Everything in flight goes back to the front of the queue, in order; what must not be asked again ends with `error`. */
  function recallInFlight(error: RequestError, culprit: Job | null): void {
    const jobs = [...inFlight];
    for (const job of jobs) {
      withdraw(job);
      if (job === culprit) job.retriesLeft -= 1;
    }
    const again = jobs.filter((job) => job.request.idempotent && job.retriesLeft >= 0);
    for (const job of again) job.sentAgain = true;
    queue.unshift(...again);
    for (const job of jobs) if (!again.includes(job)) job.settle(fail(error));
  }

  const quarantine = createQuarantine(
    clock,
    () => {
      for (const frame of decoder.flush()) wireLog.in(frame.bytes, { note: "noise" });
      pump();
    },
    () => onHopeless("The line does not fall silent."),
  );

  /** Nothing is sent until the line was silent as long as a reply may take. */
  const clearLine = () => quarantine.start(pace.replyTimeoutMs, pace.replyTimeoutMs * MAX_DRAINS, true);

  function timedOut(job: Job): void {
    const message = `No answer to “${job.request.label}” within ${Math.round(pace.replyTimeoutMs + job.request.extraMs)} ms.`;
    wireLog.event(message);
    recallInFlight({ code: "timeout", message }, job);
    clearLine();
  }

  function transmit(job: Job): void {
    inFlight.push(job);
    const waitMs = pace.replyTimeoutMs + inFlight.reduce((sum, { request }) => sum + wireMs(request), 0);
    job.cancelDeadline = afterPatiently(clock, waitMs, () => timedOut(job));
    job.logged = wireLog.out(job.request.bytes);
    send(job.request.bytes);
  }

  function maySend({ request, sentAgain }: Job): boolean {
    if (inFlight.length === 0) return true;
    // The line is cleared after the answer to one that was sent again: beside it, the answers of others would be lost too.
    if (sentAgain || inFlight.some((other) => other.sentAgain)) return false;
    const alone = !request.named || inFlight.some((other) => !other.request.named || other.request.label === request.label);
    return !alone && inFlight.length < pace.inFlight;
  }

  function pump(): void {
    for (let job = queue[0]; job && !ended && !quarantine.active && maySend(job); job = queue[0]) {
      const restMs = lastActivityMs + Math.max(pace.gapMs, codec.silenceMs) - clock.nowMs();
      if (restMs > 0) {
        cancelGap ??= clock.after(restMs, () => {
          cancelGap = null;
          pump();
        });
        return;
      }
      queue.shift();
      transmit(job);
    }
  }

  function busy(job: Job): void {
    if (!job.request.idempotent || job.busyLeft <= 0) return settle(job, fail({ code: "busy", message: `The device is busy: “${job.request.label}” was not done.` }));
    const pauseMs = BUSY_PAUSE_MS * 2 ** (pace.retries - job.busyLeft);
    withdraw(job);
    job.busyLeft -= 1;
    resting.set(
      job,
      clock.after(pauseMs, () => {
        resting.delete(job);
        queue.unshift(job);
        pump();
      }),
    );
  }

  function answer(job: Job, match: Exclude<Match, { kind: "other" }>): void {
    switch (match.kind) {
      case "reply":
        settle(job, ok({ values: match.values, fields: match.fields }));
        // This may be the answer that came late; then the other one is still to come, and must not meet a later request.
        if (job.sentAgain) clearLine();
        return;
      case "refused":
        return settle(job, fail({ code: "refused", message: `The device refused “${job.request.label}”: ${match.message}.` }));
      case "malformed":
        return settle(job, fail({ code: "malformed", message: match.message }));
      case "busy":
        return busy(job);
    }
  }

  function onFrame(frame: Frame): void {
    if (quarantine.active) return wireLog.in(frame.bytes, { note: frame.kind === "noise" ? "noise" : "late" });
    for (const job of inFlight) {
      const match = job.request.match(frame);
      if (match.kind === "other") continue;
      wireLog.in(frame.bytes, { exchange: job.logged, ...(match.kind === "refused" || match.kind === "busy" ? { note: match.kind } : {}) });
      return answer(job, match);
    }
    const echo = inFlight.some((job) => codec.isEcho(frame, job.request));
    wireLog.in(frame.bytes, { note: frame.kind === "noise" ? "noise" : echo ? "echo" : "unasked" });
    if (!echo) onUnasked(frame);
  }

  return {
    submit(request, signal) {
      return new Promise((resolve) => {
        if (ended) return resolve(fail(ended));
        if (signal?.aborted) return resolve(fail({ code: "aborted", message: `“${request.label}” was called off.` }));
        if (queue.length >= MAX_QUEUED) throw new Error(`More than ${MAX_QUEUED} requests wait`);
        const job: Job = {
          request, retriesLeft: pace.retries, busyLeft: pace.retries, sentAgain: false, logged: 0, cancelDeadline: () => {},
          settle(result) {
            signal?.removeEventListener("abort", abort);
            resolve(result);
          },
        };
        const abort = () => {
          const error: RequestError = { code: "aborted", message: `“${request.label}” was called off.` };
          const wasInFlight = withdraw(job);
          job.settle(fail(error));
          if (!wasInFlight) return;
          wireLog.event(error.message);
          recallInFlight(error, null);
          clearLine();
        };
        signal?.addEventListener("abort", abort);
        queue.push(job);
        pump();
      });
    },
    onBytes(bytes) {
      if (ended) return;
      lastActivityMs = clock.nowMs();
      for (const frame of decoder.push(bytes)) onFrame(frame);
      quarantine.disturb();
      pump();
    },
    drain: (quietMs, atMostMs) => quarantine.start(quietMs, atMostMs, false),
    whenQuiet: quarantine.whenQuiet,
    end(error) {
      if (ended) return;
      ended = error;
      cancelGap?.();
      cancelGap = null;
      for (const job of [...inFlight, ...queue, ...resting.keys()]) settle(job, fail(error));
      quarantine.cancel();
    },
  };
}
