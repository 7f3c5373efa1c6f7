import type { NewScreen } from "@/lib/contracts/screen";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

/** The contract's envelope is the same with lists that can be written to. */
export function sendable(envelope: ScreenEnvelope): NewScreen["envelope"] {
  const { sources, ...limits } = envelope;
  return {
    ...limits,
    bands: limits.bands.map(({ lineRateHz, fieldRateHz }) => ({
      lineRateHz: [lineRateHz[0], lineRateHz[1]] as [number, number],
      fieldRateHz: [fieldRateHz[0], fieldRateHz[1]] as [number, number],
    })),
    syncKinds: limits.syncKinds === undefined ? undefined : [...limits.syncKinds],
    syncVpp: limits.syncVpp === undefined ? undefined : ([limits.syncVpp[0], limits.syncVpp[1]] as [number, number]),
    sources: Object.fromEntries(
      Object.entries(sources ?? {}).flatMap(([limit, source]) => (source === undefined ? [] : [[limit, source]])),
    ),
  };
}
