import type { FaultRule, FaultedOperation, FaultWhen } from "@/lib/serial/simulator/fault-script";
import type { ByteFault, WireDirection } from "@/lib/serial/simulator/wire-fault";
import type { OperationFault } from "@/lib/serial/simulator/device-operations";

/** What can go wrong with one byte on the line, in words. */
export const LINE_FAULTS: readonly { readonly key: string; readonly label: string; readonly fault: ByteFault }[] = [
  { key: "drop", label: "Byte lost", fault: { kind: "drop" } },
  { key: "flip", label: "One bit turned over", fault: { kind: "flip", mask: 0x01 } },
  { key: "flip-high", label: "High bit turned over", fault: { kind: "flip", mask: 0x80 } },
  { key: "insert", label: "A byte of noise before it", fault: { kind: "insert", byte: 0x55 } },
  { key: "duplicate", label: "Byte doubled", fault: { kind: "duplicate" } },
  { key: "delay-short", label: "40 ms late", fault: { kind: "delay", delayMs: 40 } },
  { key: "delay-long", label: "2 s late", fault: { kind: "delay", delayMs: 2000 } },
  { key: "stall", label: "Line falls silent", fault: { kind: "stall" } },
  { key: "parity", label: "Parity error", fault: { kind: "read-error", fault: "parity" } },
  { key: "framing", label: "Framing error", fault: { kind: "read-error", fault: "framing" } },
  { key: "break", label: "Break", fault: { kind: "read-error", fault: "break" } },
  { key: "overrun", label: "Buffer overrun", fault: { kind: "read-error", fault: "overrun" } },
  { key: "write-error", label: "The system refuses a write", fault: { kind: "write-error" } },
  { key: "restart", label: "The device restarts", fault: { kind: "restart" } },
  { key: "unplug", label: "The cable comes out", fault: { kind: "unplug" } },
];

/** What can go wrong with one operation inside the device, in words. */
export const DEVICE_FAULTS: readonly { readonly key: string; readonly label: string; readonly fault: OperationFault }[] = [
  { key: "ignore", label: "Acknowledged, not done", fault: { kind: "ignore" } },
  { key: "store-other", label: "Another value stored", fault: { kind: "store-other" } },
  { key: "torn", label: "Only the first value of several stored", fault: { kind: "torn", stored: 1 } },
  { key: "refuse", label: "Refused", fault: { kind: "refuse" } },
  { key: "busy", label: "Busy", fault: { kind: "busy" } },
  { key: "silent", label: "Done, without an answer", fault: { kind: "silent" } },
];

export const PLACES: readonly { readonly value: WireDirection | "device"; readonly label: string }[] = [
  { value: "device-to-host", label: "From the device" },
  { value: "host-to-device", label: "To the device" },
  { value: "device", label: "In the device" },
];

export const OPERATIONS: readonly { readonly value: FaultedOperation; readonly label: string }[] = [
  { value: "any", label: "any request" }, { value: "read", label: "a read" }, { value: "write", label: "a write" },
  { value: "recall", label: "a recall" }, { value: "commit", label: "a commit" },
];

export const WHENS = [
  { value: "once", label: "once, at number" },
  { value: "lasting", label: "from number, for good" },
  { value: "rate", label: "at random, one in" },
] as const;

export type FaultChoice = {
  readonly place: WireDirection | "device";
  readonly operation: FaultedOperation;
  readonly fault: string;
  readonly when: (typeof WHENS)[number]["value"];
  /** n, or one in so many. */
  readonly count: number;
  readonly seed: number;
};

export const FIRST_CHOICE: FaultChoice = { place: "device-to-host", operation: "any", fault: "flip", when: "once", count: 100, seed: 1 };

/** Largest count that can be chosen: bytes of some hundred whole reads. */
export const MAX_COUNT = 1_000_000;

export function faultsOf(place: FaultChoice["place"]): readonly { readonly key: string; readonly label: string }[] {
  return place === "device" ? DEVICE_FAULTS : LINE_FAULTS;
}

function whenOf({ when, count, seed }: FaultChoice): FaultWhen {
  return when === "rate" ? { kind: "rate", oneIn: count, seed } : { kind: "nth", n: count, lasting: when === "lasting" };
}

/** The rule of a choice; null where the fault does not belong to the place. */
export function ruleOf(choice: FaultChoice): FaultRule | null {
  const when = whenOf(choice);
  if (choice.place === "device") {
    const found = DEVICE_FAULTS.find(({ key }) => key === choice.fault);
    return found ? { place: "device", operation: choice.operation, fault: found.fault, when } : null;
  }
  const found = LINE_FAULTS.find(({ key }) => key === choice.fault);
  return found ? { place: choice.place, fault: found.fault, when } : null;
}

/** "From the device: one bit turned over, at a byte, number 100, once". */
export function faultWords(choice: FaultChoice): string {
  const place = PLACES.find(({ value }) => value === choice.place)?.label ?? "";
  const what = faultsOf(choice.place).find(({ key }) => key === choice.fault)?.label ?? "";
  const unit = choice.place === "device" ? `at ${OPERATIONS.find(({ value }) => value === choice.operation)?.label ?? ""}` : "at a byte";
  const when = choice.when === "rate" ? `one in ${choice.count}, seed ${choice.seed}` : choice.when === "once" ? `number ${choice.count}, once` : `from number ${choice.count} on`;
  return `${place}: ${what.toLowerCase()}, ${unit}, ${when}`;
}
