import type { DeviceOperation, OperationFault } from "./device-operations";
import { fateOf, type ByteFault, type WireDirection, type WireFault } from "./wire-fault";

/**
 * When a rule strikes: at the n-th byte or operation after it was set (from 1), that one or it and all after it; or one in
 * so many, by chance from a seed.
 */
export type FaultWhen =
  | { readonly kind: "nth"; readonly n: number; readonly lasting: boolean }
  | { readonly kind: "rate"; readonly oneIn: number; readonly seed: number };

export type FaultedOperation = "any" | "read" | "write" | "recall" | "commit";

/** One line of a fault script: on the line, at a byte; or inside the device, at an operation. */
export type FaultRule =
  | { readonly place: WireDirection; readonly fault: ByteFault; readonly when: FaultWhen }
  | { readonly place: "device"; readonly operation: FaultedOperation; readonly fault: OperationFault; readonly when: FaultWhen };

/** What a script does to one device and its wire. */
export type FaultScript = {
  readonly wire: WireFault;
  readonly device: (operation: DeviceOperation) => OperationFault | undefined;
};

/** Numbers from 0 to 1, the same for the same seed: a linear congruential generator (constants of Numerical Recipes). */
function chanceFrom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return state / 2 ** 32;
  };
}

/** Whether the rule strikes, asked once for each byte or operation of its kind. */
function strikes(when: FaultWhen): () => boolean {
  if (when.kind === "rate") {
    const chance = chanceFrom(when.seed);
    return () => chance() * when.oneIn < 1;
  }
  let count = 0;
  return () => {
    count += 1;
    return when.lasting ? count >= when.n : count === when.n;
  };
}

function isOf(operation: DeviceOperation, wanted: FaultedOperation): boolean {
  if (wanted === "any" || operation.kind === wanted) return true;
  return operation.kind === "action" && operation.name === wanted;
}

/**
 * Makes a script of rules; counting begins when it is made.
 *
 * The first rule that strikes decides, and every rule counts what passes it.
 * @param rules at most a few: each byte is shown to all of them
 */
export function faultScript(rules: readonly FaultRule[]): FaultScript {
  const onWire = rules.flatMap((rule) => (rule.place === "device" ? [] : [{ ...rule, strikes: strikes(rule.when) }]));
  const inDevice = rules.flatMap((rule) => (rule.place === "device" ? [{ ...rule, strikes: strikes(rule.when) }] : []));
  return {
    wire: {
      onByte(byte, _index, direction) {
        const struck = onWire.filter((rule) => rule.place === direction && rule.strikes());
        return struck[0] ? fateOf(struck[0].fault, byte) : { kind: "pass" };
      },
    },
    device(operation) {
      const struck = inDevice.filter((rule) => isOf(operation, rule.operation) && rule.strikes());
      return struck[0]?.fault;
    },
  };
}
