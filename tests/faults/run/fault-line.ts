import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { readsOfAll } from "@/lib/serial/driver/costs";
import { sealFrame } from "@/lib/serial/protocols/modbus/frames";
import { sealPacket } from "@/lib/serial/protocols/packet/packets";
import { encodeLine } from "@/lib/serial/protocols/text/line";
import type { ByteFate, WireDirection, WireFault } from "@/lib/serial/simulator/wire-fault";
import { hexOf } from "@/lib/serial/wire-log";

/** Faults inside the device, at the next request that they can go with. */
export const DEVICE_FAULTS = ["ignored", "other", "torn", "refused", "busy", "silent"] as const;
/** What happens beside the line: the device timer fires, the tab goes, the whole browser goes, a second tab comes, the owner presses Stop. */
export const ACTS = ["timer", "tab", "browser", "second-tab", "stop"] as const;
/**
 * What goes wrong at one request of a run.
 *
 * `request-lost`, `reply-lost`: the line is damaged, so that its check fails. `…-unplug`, `…-restart`: the request never
 * arrives, or was done and its reply never comes. `reply-late`: it comes when nobody waits for it any more. `foreign`: a
 * whole frame that answers nothing stands before the reply.
 */
export const FAULT_KINDS = [
  "request-lost", "reply-lost", "request-unplug", "reply-unplug", "request-restart", "reply-restart", "reply-late", "foreign",
  ...DEVICE_FAULTS, ...ACTS,
] as const;
export type FaultKind = (typeof FAULT_KINDS)[number];
export type DeviceFault = (typeof DEVICE_FAULTS)[number];
export type Act = (typeof ACTS)[number];
export type Fault = { readonly at: number; readonly kind: FaultKind };

export type LineHooks = { readonly onDeviceFault: (kind: DeviceFault) => void; readonly onAct: (kind: Act) => void };

type ReplyFault = "lost" | "unplug" | "restart" | "late" | "foreign";

const PASS: ByteFate = { kind: "pass" };
const UNPLUG: ByteFate = { kind: "event", event: { kind: "unplug", order: "stream-first" } };
const RESTART: ByteFate = { kind: "event", event: { kind: "restart" } };
/** One in so many queries of single settings is a point where something goes wrong: to the run they are all alike. */
const QUERY_STRIDE = 12;

/** A whole frame that answers no request: a line of its own, another unit's reply, another block's. */
function foreignFrame({ definition: { protocol } }: CompiledDriver): readonly number[] {
  if (protocol.kind === "text") return [...encodeLine(protocol, "ROOM:TEMP 21")];
  if (protocol.kind === "modbus-rtu") return [...sealFrame([protocol.unit + 1, 3, 2, 0, 5])];
  return [...sealPacket(protocol, [0x81, 200, 0, 5])];
}

/** Counts the requests of a run, whatever the protocol, and lets the faults strike, each at its own, once. */
export class FaultLine implements WireFault {
  /** Points passed so far: every request but most queries of single settings. */
  points = 0;
  fired = 0;
  /** Requests on their way: what is left of each, in order. */
  private under: { readonly bytes: Uint8Array; left: number }[] = [];
  private queries = 0;
  private onReply: ReplyFault | null = null;
  private active = false;
  private readonly faults: Fault[];
  private readonly single: ReadonlySet<string>;
  private readonly foreign: readonly number[];
  private readonly lateMs: number;

  constructor(
    driver: CompiledDriver,
    faults: readonly Fault[],
    private readonly hooks: LineHooks,
  ) {
    const { protocol, pace } = driver.definition;
    this.faults = [...faults];
    this.single = new Set(protocol.kind === "text" ? readsOfAll(driver).map(({ bytes }) => hexOf(bytes)) : []);
    this.foreign = foreignFrame(driver);
    this.lateMs = pace.replyTimeoutMs * 1.3;
  }

  /** From now on requests count. */
  begin(): void {
    this.active = true;
  }

  /** One more fault, so many points from now. */
  add(kind: FaultKind, ahead: number): void {
    this.faults.push({ kind, at: this.points + ahead });
  }

  /** A new session: what the old one had under way never leaves. */
  forget(): void {
    this.under = [];
    this.onReply = null;
  }

  /** A request that the page hands to the port. */
  announce(bytes: Uint8Array): void {
    this.under.push({ bytes, left: bytes.length });
  }

  onByte(byte: number, _index: number, direction: WireDirection): ByteFate {
    if (direction === "device-to-host") return this.reply(byte);
    const [first] = this.under;
    if (!first) return PASS;
    first.left -= 1;
    if (first.left > 0) return PASS;
    this.under.shift();
    return this.active && this.isPoint(first.bytes) ? this.pass(byte) : PASS;
  }

  private reply(byte: number): ByteFate {
    const happens = this.onReply;
    this.onReply = null;
    switch (happens) {
      case null:
        return PASS;
      case "lost":
        return { kind: "replace", bytes: [byte ^ 1] };
      case "late":
        return { kind: "delay", delayMs: this.lateMs };
      case "foreign":
        return { kind: "replace", bytes: [...this.foreign, byte] };
      case "unplug":
        return UNPLUG;
      case "restart":
        return RESTART;
    }
  }

  private isPoint(bytes: Uint8Array): boolean {
    if (!this.single.has(hexOf(bytes))) return true;
    this.queries += 1;
    return this.queries % QUERY_STRIDE === 1;
  }

  private pass(byte: number): ByteFate {
    const at = this.points;
    this.points += 1;
    const fault = this.faults.find((one) => one.at === at);
    if (!fault) return PASS;
    this.fired += 1;
    return this.strike(fault.kind, byte);
  }

  private strike(kind: FaultKind, byte: number): ByteFate {
    switch (kind) {
      case "request-lost":
        return { kind: "replace", bytes: [byte ^ 1, byte] };
      case "request-unplug":
        return UNPLUG;
      case "request-restart":
        return RESTART;
      case "reply-lost":
      case "reply-unplug":
      case "reply-restart":
      case "reply-late":
        // The names differ in their first word alone.
        this.onReply = kind.slice("reply-".length) as ReplyFault;
        return PASS;
      case "foreign":
        this.onReply = "foreign";
        return PASS;
      case "timer":
      case "tab":
      case "browser":
      case "second-tab":
      case "stop":
        this.hooks.onAct(kind);
        return PASS;
      default:
        this.hooks.onDeviceFault(kind);
        return PASS;
    }
  }
}
