import type { ByteFate, WireDirection, WireFault } from "@/lib/serial/simulator/wire-fault";

/**
 * What goes wrong at one request of a run.
 *
 * `request-lost`, `reply-lost`: the line is damaged, so that its check fails. `…-unplug`, `…-restart`: the request never
 * arrives, or was done and its reply never comes. `ignored`, `other`, `torn`: a write or commit is acknowledged and not
 * stored, stored as another value, stored in part. `timer`: the device timer fires. `tab`: the page is gone. `stop`: the
 * owner presses Stop.
 */
export const FAULT_KINDS = [
  "request-lost", "reply-lost", "request-unplug", "reply-unplug", "request-restart", "reply-restart",
  "ignored", "other", "torn", "timer", "tab", "stop",
] as const;
export type FaultKind = (typeof FAULT_KINDS)[number];
export type Fault = { readonly at: number; readonly kind: FaultKind };

export type LineHooks = {
  /** A request whose last byte leaves: before the device has it. */
  readonly onRequest: (line: string) => void;
  readonly onFault: (kind: "ignored" | "other" | "torn" | "timer" | "tab" | "stop") => void;
};

const NEWLINE = 10;
const PASS: ByteFate = { kind: "pass" };
/** One in so many queries of settings is a point where something goes wrong: to the run they are all alike. */
const QUERY_STRIDE = 12;

/** A query of a setting, as whole reads send by the dozen. */
function isSettingQuery(line: string): boolean {
  return /^(?:TRIM|SLOT\d|MODE\d|SYST:START|SYST:FAN)[A-Z:]*\?/u.test(line);
}

/** Counts the requests of a run and lets the faults strike, each at its own, once. */
export class FaultLine implements WireFault {
  /** Points passed so far: every request but most queries of settings. */
  points = 0;
  fired = 0;
  private line = "";
  private queries = 0;
  private damageReply = false;
  private onReply: "unplug" | "restart" | null = null;
  private active = false;

  constructor(
    private readonly faults: readonly Fault[],
    private readonly hooks: LineHooks,
  ) {}

  /** From now on requests count. */
  begin(): void {
    this.active = true;
  }

  onByte(byte: number, _index: number, direction: WireDirection): ByteFate {
    if (!this.active) return PASS;
    return direction === "device-to-host" ? this.reply(byte) : this.request(byte);
  }

  private reply(byte: number): ByteFate {
    if (this.onReply !== null) {
      const happens = this.onReply;
      this.onReply = null;
      return { kind: "event", event: happens === "unplug" ? { kind: "unplug", order: "stream-first" } : { kind: "restart" } };
    }
    if (!this.damageReply) return PASS;
    this.damageReply = false;
    // Two letters in the place of one: a CRC of 16 bits finds every burst of up to 16.
    return { kind: "replace", bytes: [byte ^ 1] };
  }

  private request(byte: number): ByteFate {
    if (byte !== NEWLINE) {
      this.line += String.fromCharCode(byte);
      return PASS;
    }
    const line = this.line;
    this.line = "";
    this.hooks.onRequest(line);
    if (!this.isPoint(line)) return PASS;
    const at = this.points;
    this.points += 1;
    const fault = this.faults.find((one) => one.at === at);
    return fault ? this.strike(fault.kind) : PASS;
  }

  private isPoint(line: string): boolean {
    if (!isSettingQuery(line)) return true;
    this.queries += 1;
    return this.queries % QUERY_STRIDE === 1;
  }

  private strike(kind: FaultKind): ByteFate {
    this.fired += 1;
    switch (kind) {
      case "request-lost":
        return { kind: "replace", bytes: [0x58, NEWLINE] };
      case "reply-lost":
        this.damageReply = true;
        return PASS;
      case "reply-unplug":
      case "reply-restart":
        this.onReply = kind === "reply-unplug" ? "unplug" : "restart";
        return PASS;
      case "request-unplug":
        return { kind: "event", event: { kind: "unplug", order: "stream-first" } };
      case "request-restart":
        return { kind: "event", event: { kind: "restart" } };
      default:
        this.hooks.onFault(kind);
        return PASS;
    }
  }
}
