import { fateOf, type ByteFate, type ByteFault, type WireDirection, type WireFault } from "@/lib/serial/simulator/wire-fault";

/**
 * What may happen to a byte on the line, by the names that stand in ids. Delays: below every time limit of the shipped
 * devices, between a device's patience with half a request and the page's with a reply, and above both.
 */
export const BYTE_FAULTS = {
  drop: { kind: "drop" }, duplicate: { kind: "duplicate" },
  "insert-0a": { kind: "insert", byte: 0x0a }, "insert-c0": { kind: "insert", byte: 0xc0 }, "insert-11": { kind: "insert", byte: 0x11 },
  flip0: { kind: "flip", mask: 1 }, flip1: { kind: "flip", mask: 2 }, flip2: { kind: "flip", mask: 4 }, flip3: { kind: "flip", mask: 8 },
  flip4: { kind: "flip", mask: 16 }, flip5: { kind: "flip", mask: 32 }, flip6: { kind: "flip", mask: 64 }, flip7: { kind: "flip", mask: 128 },
  "delay-15": { kind: "delay", delayMs: 15 }, "delay-200": { kind: "delay", delayMs: 200 }, "delay-700": { kind: "delay", delayMs: 700 },
  stall: { kind: "stall" },
  "unplug-stream": { kind: "unplug", order: "stream-first" }, "unplug-event": { kind: "unplug", order: "event-first" }, "unplug-unknown": { kind: "unplug", order: "unknown-error-first" },
  restart: { kind: "restart" },
  parity: { kind: "read-error", fault: "parity" }, framing: { kind: "read-error", fault: "framing" }, break: { kind: "read-error", fault: "break" },
  overrun: { kind: "read-error", fault: "overrun" }, system: { kind: "read-error", fault: "system" }, "write-error": { kind: "write-error" },
} as const satisfies Readonly<Record<string, ByteFault>>;
export type ByteFaultName = keyof typeof BYTE_FAULTS;

const FLIPS = ["flip0", "flip1", "flip2", "flip3", "flip4", "flip5", "flip6", "flip7"] as const satisfies readonly ByteFaultName[];

/** One fault a kind; the flipped bit moves on from byte to byte, and so does the byte put in. */
export const BYTE_KINDS = [
  "drop", "flip", "duplicate", "insert", "delay-15", "delay-200", "delay-700", "stall", "unplug-stream", "unplug-event", "unplug-unknown",
  "restart", "parity", "framing", "break", "overrun", "system", "write-error",
] as const;
export type ByteKind = (typeof BYTE_KINDS)[number];

/** The faults of a kind at byte n: one in the cover, all eight bits and all bytes put in where everything is swept. */
export function faultsOfKind(kind: ByteKind, n: number, everything: boolean): readonly ByteFaultName[] {
  const inserts = ["insert-0a", "insert-c0", "insert-11"] as const;
  if (kind === "flip") return everything ? FLIPS : [FLIPS[n % FLIPS.length] ?? "flip0"];
  if (kind === "insert") return everything ? inserts : [inserts[n % inserts.length] ?? "insert-0a"];
  return [kind];
}

export type ByteTrouble = {
  readonly fault: ByteFaultName;
  readonly direction: WireDirection;
  /** Byte of that direction, from 0 since the sweep's start. */
  readonly at: number;
  /** It strikes at every byte from there on, until somebody sees to the line. */
  readonly lasting: boolean;
};

const PASS: ByteFate = { kind: "pass" };

/** Lets byte faults strike. Counts bytes of each direction from when it begins. */
export class ByteLine implements WireFault {
  /** How many of the troubles have struck. */
  struck = 0;
  /** Bytes of each direction since it began. */
  readonly counts = { "host-to-device": 0, "device-to-host": 0 };
  private readonly done = new Set<ByteTrouble>();
  private lifted = false;
  private active = false;

  constructor(private readonly troubles: readonly ByteTrouble[]) {}

  /** From now on bytes count. */
  begin(): void {
    this.active = true;
  }

  /** Somebody saw to the line: nothing lasts. */
  lift(): void {
    this.lifted = true;
  }

  onByte(byte: number, _index: number, direction: WireDirection): ByteFate {
    if (!this.active) return PASS;
    const at = this.counts[direction];
    this.counts[direction] += 1;
    for (const trouble of this.troubles) {
      if (trouble.direction !== direction || !this.strikes(trouble, at)) continue;
      if (!this.done.has(trouble)) this.struck += 1;
      this.done.add(trouble);
      return fateOf(BYTE_FAULTS[trouble.fault], byte);
    }
    return PASS;
  }

  private strikes(trouble: ByteTrouble, at: number): boolean {
    if (trouble.lasting) return at >= trouble.at && !this.lifted;
    return at === trouble.at && !this.done.has(trouble);
  }
}
