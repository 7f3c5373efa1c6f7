import type { CompiledDriver, WireRequest } from "@/lib/serial/driver/compiled";
import type { ActionName, StatusName } from "@/lib/serial/driver/definition";
import type { DeviceOperation } from "@/lib/serial/simulator/device-operations";
import { createRequestReader } from "./request-reader";

/** What a driver would send where a recording has certain bytes: the same, or the nearest that it knows. */
export type DriverWords = {
  /** Null: the driver has no request at all. */
  requestFor(recorded: Uint8Array): WireRequest | null;
};

/** Bytes at the beginning that two requests have in common. */
export function commonStart(left: Uint8Array, right: Uint8Array): number {
  const most = Math.min(left.length, right.length);
  let at = 0;
  while (at < most && left[at] === right[at]) at += 1;
  return at;
}

export function sameBytes(left: Uint8Array, right: Uint8Array): boolean {
  return left.length === right.length && commonStart(left, right) === left.length;
}

const nearest = (requests: readonly WireRequest[], recorded: Uint8Array): WireRequest | null => {
  let best: WireRequest | null = null;
  for (const request of requests) if (best === null || commonStart(request.bytes, recorded) > commonStart(best.bytes, recorded)) best = request;
  return best;
};

function requestsOf({ codec }: CompiledDriver, operation: DeviceOperation): readonly WireRequest[] {
  switch (operation.kind) {
    case "read":
      return codec.planReads(operation.keys);
    case "write": {
      const planned = codec.planWrite(operation.writes);
      return planned.ok ? [planned.value] : [];
    }
    case "status":
      return [codec.planStatus(operation.name) ?? []].flat();
    case "action":
      return [codec.planAction(operation.name, operation.fields) ?? []].flat();
  }
}

/** Queries and reads, one at a time, and orders and writes with some value: what there is to be near to. */
function vocabulary({ codec, definition, settings }: CompiledDriver, statuses: readonly WireRequest[]): readonly WireRequest[] {
  const fields = { slot: definition.slots.first, seconds: 1 };
  // The keys of the definition's records are its action names.
  const actions = (Object.keys(definition.actions) as ActionName[]).flatMap((name) => codec.planAction(name, fields) ?? []);
  const writes = settings.flatMap(({ key, initial, writable }) => {
    const planned = writable ? codec.planWrite([{ key, value: initial }]) : null;
    return planned?.ok ? [planned.value] : [];
  });
  return [...statuses, ...codec.planReads(settings.filter(({ readable }) => readable).map(({ key }) => key)), ...actions, ...writes];
}

/** Bound: a driver has `MAX_SETTINGS` settings at most; its vocabulary is made once, when something is not understood. */
export function createDriverWords(driver: CompiledDriver): DriverWords {
  const readRequest = createRequestReader(driver);
  const statuses = (Object.keys(driver.definition.status) as StatusName[]).flatMap((name) => driver.codec.planStatus(name) ?? []);
  let all: readonly WireRequest[] | null = null;
  return {
    requestFor(recorded) {
      const status = statuses.find(({ bytes }) => sameBytes(bytes, recorded));
      if (status) return status;
      const meant = readRequest(recorded).flatMap((operation) => requestsOf(driver, operation));
      if (meant.length > 0) return nearest(meant, recorded);
      all ??= vocabulary(driver, statuses);
      return nearest(all, recorded);
    },
  };
}
