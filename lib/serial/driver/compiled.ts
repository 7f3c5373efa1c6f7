import type { Result } from "@/lib/result";
import type { NativeKey, NativeValue, NativeValues, NativeWrite } from "@/lib/serial/native";
import type { ActionName, DriverDefinition, DriverSetting, SettingValue, StatusName } from "./definition";

/** One setting of one device: a driver's setting with its slot or mode number put in. */
export type CompiledSetting = {
  readonly key: NativeKey;
  /** The driver's own key, with `[*]`. */
  readonly pattern: string;
  readonly label: string;
  readonly scope: "everywhere" | "slot" | "mode";
  /** Slot or mode number; absent in scope `everywhere`. */
  readonly number: number | undefined;
  /** The setting has a place in a profile document: its key is the neutral path. */
  readonly neutral: boolean;
  readonly value: SettingValue;
  readonly initial: NativeValue;
  readonly readable: boolean;
  readonly writable: boolean;
  readonly source: DriverSetting;
};

/** Named values of a status reply or the arguments of an order. */
export type Fields = Readonly<Record<string, NativeValue>>;

/** One unit off the wire: a line, a frame, a packet. `noise` carries bytes that no reply can be made of. */
export type Frame =
  | { readonly kind: "frame"; readonly bytes: Uint8Array; readonly text: string }
  | { readonly kind: "noise"; readonly bytes: Uint8Array; readonly why: "check" | "too-long" | "not-text" | "no-check" | "cut-short" };

/** What a frame is to a request that waits. */
export type Match =
  | { readonly kind: "other" }
  | { readonly kind: "reply"; readonly values: NativeValues; readonly fields: Fields }
  | { readonly kind: "refused"; readonly message: string }
  | { readonly kind: "busy" }
  | { readonly kind: "malformed"; readonly message: string };

/** One request, ready for the wire. */
export type WireRequest = {
  /** As the wire log and messages show it. */
  readonly label: string;
  readonly bytes: Uint8Array;
  /** Length of the reply: exact where the value is known, else for the value given when it was planned. */
  readonly replyBytes: number;
  /** Time the device needs beside its usual work. */
  readonly extraMs: number;
  /** Its reply names it: others may be in flight beside it. */
  readonly named: boolean;
  /** Asking again does no harm. Writes are not: what a lost reply means is found by reading back. */
  readonly idempotent: boolean;
  readonly keys: readonly NativeKey[];
  match(frame: Frame): Match;
};

/** Bytes in, frames out. Work is linear in the bytes, memory is bounded by one frame. */
export interface FrameDecoder {
  push(bytes: Uint8Array): Frame[];
  /** Ends what is half received, as noise. */
  flush(): Frame[];
  /** Bytes held back for a frame that is not complete. */
  readonly heldBytes: number;
}

/** The host's side of a protocol, made once from a driver. */
export interface ProtocolCodec {
  readonly kind: "text" | "modbus-rtu" | "packet";
  /** Silence that the protocol demands before each request but the first, in ms. */
  readonly silenceMs: number;
  /** The requests that read these settings in the least time. `values` (default: a new device's) fix the length of replies. */
  planReads(keys: readonly NativeKey[], values?: NativeValues): readonly WireRequest[];
  /** One request for one setting, or for neighbours that one request carries. Fails with a sentence. */
  planWrite(writes: readonly NativeWrite[]): Result<WireRequest, string>;
  /** @param answer what will be answered, where it is known: a text reply is as long as its words */
  planStatus(name: StatusName, answer?: Fields): WireRequest | null;
  planAction(name: ActionName, fields: Fields): WireRequest | null;
  createDecoder(): FrameDecoder;
  /** The frame repeats a request word for word: a line that echoes. */
  isEcho(frame: Frame, request: WireRequest): boolean;
  /**
   * The same bytes with every name and serial number in them replaced by as many `x`, and their check renewed.
   * @param request what these bytes answer, where that is known
   */
  strikeOut(bytes: Uint8Array, request?: Uint8Array): Uint8Array;
}

/** A driver definition with everything worked out once that its use needs again and again. */
export type CompiledDriver = {
  readonly definition: DriverDefinition;
  /** Slots and modes counted out, in the definition's order. */
  readonly settings: readonly CompiledSetting[];
  readonly byKey: ReadonlyMap<NativeKey, CompiledSetting>;
  readonly codec: ProtocolCodec;
};
