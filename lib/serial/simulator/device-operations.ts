import type { Fields } from "@/lib/serial/driver/compiled";
import type { ActionName, StatusName } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValues, NativeWrite } from "@/lib/serial/native";

/** What a request asks of a device, whatever the protocol. */
export type DeviceOperation =
  | { readonly kind: "read"; readonly keys: readonly NativeKey[] }
  | { readonly kind: "write"; readonly writes: readonly NativeWrite[] }
  | { readonly kind: "status"; readonly name: StatusName }
  | { readonly kind: "action"; readonly name: ActionName; readonly fields: Fields };

/** Codes follow the SCPI error numbers: −222 data out of range, −221 settings conflict, −224 illegal parameter, −113 undefined header. */
export type DeviceAnswer =
  | { readonly kind: "values"; readonly values: NativeValues; readonly fields: Fields }
  | { readonly kind: "refused"; readonly code: number; readonly message: string }
  | { readonly kind: "busy" }
  /** Done, and nothing is said. */
  | { readonly kind: "silent" };

export const DONE: DeviceAnswer = { kind: "values", values: {}, fields: {} };

/** A refusal. @param code an SCPI error number */
export function refused(code: number, message: string): DeviceAnswer & { kind: "refused" } {
  return { kind: "refused", code, message };
}

/**
 * What goes wrong with one operation inside the device.
 *
 * `ignore`: acknowledged, not done. `store-other`: another value is stored. `torn`: only the first `stored` settings are.
 * `busy`, `refuse`: said so, not done. `silent`: done, without an answer.
 */
export type OperationFault =
  | { readonly kind: "ignore" }
  | { readonly kind: "store-other" }
  | { readonly kind: "torn"; readonly stored: number }
  | { readonly kind: "busy" }
  | { readonly kind: "refuse" }
  | { readonly kind: "silent" };

/** What a device did since it was made. */
export type DeviceCounts = {
  readonly reads: number;
  readonly writes: number;
  readonly recalls: number;
  readonly commits: number;
  readonly timerActs: number;
  readonly refusals: number;
  /** Writes that reached non-volatile memory, by key (a commit counts each key that it changed). */
  readonly stored: Readonly<Record<NativeKey, number>>;
  readonly readsByKey: Readonly<Record<NativeKey, number>>;
  readonly writesByKey: Readonly<Record<NativeKey, number>>;
};
