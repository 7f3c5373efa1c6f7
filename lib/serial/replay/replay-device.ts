import type { Clock } from "@/lib/serial/clock";
import type { Recording } from "@/lib/serial/recording";
import type { DeviceModel } from "@/lib/serial/simulator/device-model-interface";

/** Where a host parted from the recording: its first byte that was not recorded there. Counts as in `RecordingDifference`. */
export type ReplayDifference = {
  readonly exchange: number;
  readonly line: number;
  readonly offset: number;
  /** Null: the recording has no further request. */
  readonly expected: number | null;
  readonly got: number;
};

export type ReplayOutcome = { readonly kind: "playing" } | { readonly kind: "finished" } | { readonly kind: "differs"; readonly difference: ReplayDifference };

/** A recording that plays itself back as a device. */
export interface ReplayDevice extends DeviceModel {
  readonly outcome: ReplayOutcome;
  /** Requests that came as recorded. */
  readonly exchangesDone: number;
  /** Called once, at the first byte that was not recorded. */
  onDiffers(listener: (difference: ReplayDifference) => void): void;
}

export type ReplayOptions = {
  readonly clock: Clock;
  /** `recorded`: an answer takes the time that it took. `at-once`: none. */
  readonly pace: "recorded" | "at-once";
};

type Request = { readonly bytes: Uint8Array; readonly line: number; readonly atMs: number };
/** An answer leaves when so many requests came. */
type Answer = { readonly bytes: Uint8Array; readonly needs: number; readonly delayMs: number };

/**
 * Requests, and answers with the request each waits for: the m-th answer never waits for more than m requests, so that a host with
 * fewer under way than the recorded one is answered too.
 */
function scriptOf({ lines }: Recording): { readonly requests: readonly Request[]; readonly answers: readonly Answer[] } {
  const requests: Request[] = [];
  const answers: Answer[] = [];
  for (const [index, entry] of lines.entries()) {
    if (entry.direction === "out") requests.push({ bytes: entry.bytes, line: index + 2, atMs: entry.atMs });
    if (entry.direction !== "in") continue;
    // What came before the first request comes with it: nobody listened before.
    const needs = Math.max(1, Math.min(requests.length, answers.length + 1));
    answers.push({ bytes: entry.bytes, needs, delayMs: Math.max(0, entry.atMs - (requests[needs - 1]?.atMs ?? entry.atMs)) });
  }
  return { requests, answers };
}

/** Plays a recording back: says what was answered, and falls silent for good at the first byte that the host says differently. */
export function createReplayDevice(recording: Recording, { clock, pace }: ReplayOptions): ReplayDevice {
  const { requests, answers } = scriptOf(recording);
  let send: (bytes: Uint8Array) => void = () => undefined;
  let tell: (difference: ReplayDifference) => void = () => undefined;
  let outcome: ReplayOutcome = { kind: "playing" };
  let done = 0;
  let offset = 0;
  let said = 0;

  function answer(): void {
    for (let next = answers[said]; next && next.needs <= done; next = answers[said]) {
      const { bytes, delayMs } = next;
      said += 1;
      if (pace === "at-once") send(bytes);
      else clock.after(delayMs, () => outcome.kind !== "differs" && send(bytes));
    }
    if (done === requests.length && said === answers.length) outcome = { kind: "finished" };
  }

  function takeByte(byte: number): void {
    const request = requests[done];
    const expected = request?.bytes[offset] ?? null;
    if (expected !== byte) {
      const difference = { exchange: done + 1, line: request?.line ?? recording.lines.length + 1, offset, expected, got: byte };
      outcome = { kind: "differs", difference };
      return tell(difference);
    }
    offset += 1;
    if (offset < (request?.bytes.length ?? 0)) return;
    done += 1;
    offset = 0;
    answer();
  }

  return {
    get outcome() {
      return outcome;
    },
    get exchangesDone() {
      return done;
    },
    onDiffers(listener) {
      tell = listener;
    },
    attach(next) {
      send = next;
    },
    receive(bytes) {
      for (const byte of bytes) if (outcome.kind !== "differs") takeByte(byte);
    },
    // A recording has one course: what a power cut would do is not in it.
    powerCycle: () => undefined,
    restart: () => undefined,
  };
}
