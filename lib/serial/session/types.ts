import type { Result } from "@/lib/result";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import type { NativeKey, NativeValues, NativeWrite } from "@/lib/serial/native";

/** Why a request gave no answer, or not the wanted one. `lost` and `timeout` of a write mean *unknown*, never "failed". */
export type RequestError = {
  readonly code:
    | "timeout" // no reply within the deadline; the line was drained
    | "refused" // the device said no
    | "busy" // still busy after the bounded retries
    | "malformed" // a reply that fits the request's tag but not its template
    | "aborted" // by the caller's signal; the line was drained
    | "lost" // the port or the session ended
    | "unsupported"; // the driver has no word for it
  /** What was awaited, or what the device said, in one sentence. */
  readonly message: string;
};

export type DeviceIdentity = {
  readonly maker: string;
  readonly model: string;
  /** Absent where the device has none: then the identity is a guess and the page says so. */
  readonly serialNumber?: string | undefined;
  readonly firmware: string;
};

/** What stands at the device's input now. */
export type Arriving = { readonly input: string; readonly format: SourceFormat | null; readonly locked: boolean };

/** One whole read: begins and ends with `bootCount` (made again when it moved), the active slot and the raster that is out last. */
export type WholeRead = {
  readonly values: NativeValues;
  /** Keys that the device cannot be asked. */
  readonly unreadable: readonly NativeKey[];
  readonly activeSlot: number;
  /** Where the driver has the query (timing takes effect on recall). Null: nothing is put out. */
  readonly rasterOut?: RasterTiming | null | undefined;
  readonly bootCount?: number | undefined;
  /** Working and non-volatile memory agree: asked before the values, where the driver has the query. */
  readonly committed?: boolean | undefined;
};

export type ReadProgress = { readonly done: number; readonly total: number; readonly secondsLeft: number };

/** The outcome of one write request. `unknown`: the reply was lost; read it back. */
export type WriteOutcome = { readonly outcome: "acknowledged" } | { readonly outcome: "unknown"; readonly message: string };

/** Why a session did not come to be. `open-refused`: the system refuses, with one message for all causes. */
export type OpenFailure =
  | { readonly code: "open-refused" }
  | { readonly code: "already-open" }
  | { readonly code: "other-device"; readonly found: string; readonly wanted: string }
  /** The port is open and nobody answers; `detail` says what was awaited. */
  | { readonly code: "silent"; readonly detail: string }
  | { readonly code: "other"; readonly detail: string };

export type SessionState =
  | { readonly name: "closed" }
  | { readonly name: "opening" }
  | { readonly name: "identifying" }
  | { readonly name: "ready"; readonly identity: DeviceIdentity }
  /** The port went away or the device fell silent: `cause` for the page. */
  | { readonly name: "lost"; readonly cause: string };

/** What plan-running, backup and the page know of a live device. Implemented once, over any port and any protocol. */
export interface DeviceSession {
  readonly state: SessionState;
  onState(listener: (state: SessionState) => void): () => void;
  /** Asks identity (twice, bearing boot chatter before the first). */
  identify(signal?: AbortSignal): Promise<Result<DeviceIdentity, RequestError>>;
  /** Reads everything once, with the cheapest requests. */
  readWhole(options?: { readonly onProgress?: (progress: ReadProgress) => void; readonly signal?: AbortSignal }): Promise<Result<WholeRead, RequestError>>;
  /** Reads some settings (retried: reads are idempotent). */
  read(keys: readonly NativeKey[], signal?: AbortSignal): Promise<Result<NativeValues, RequestError>>;
  /** One write request: one setting, or the neighbours that one request carries. Leaves the wire once; the caller decides on a retry after reading back. */
  write(writes: readonly NativeWrite[], signal?: AbortSignal): Promise<Result<WriteOutcome, RequestError>>;
  /** Leaves the wire once. A lost reply is `unknown`. */
  recall(slot: number, signal?: AbortSignal): Promise<Result<WriteOutcome, RequestError>>;
  /** Leaves the wire once. A lost reply is `unknown`. */
  commit(signal?: AbortSignal): Promise<Result<WriteOutcome, RequestError>>;
  mute(on: boolean, signal?: AbortSignal): Promise<Result<WriteOutcome, RequestError>>;
  /** `refused`: none is armed (extend, confirm, disarm). A lost answer is asked again. */
  timer(act: "arm" | "extend" | "confirm" | "disarm", seconds?: number, signal?: AbortSignal): Promise<Result<"done" | "refused", RequestError>>;
  activeSlot(signal?: AbortSignal): Promise<Result<number, RequestError>>;
  rasterOut(signal?: AbortSignal): Promise<Result<RasterTiming | null, RequestError>>;
  bootCount(signal?: AbortSignal): Promise<Result<number, RequestError>>;
  committed(signal?: AbortSignal): Promise<Result<boolean, RequestError>>;
  arriving(signal?: AbortSignal): Promise<Result<Arriving, RequestError>>;
  close(): Promise<void>;
}

