import type { WiredDevice } from "@/lib/serial/simulator/wired-device";

/** A device that is ready to be put on a byte stream. `onBytes` is where its bytes go from now on. */
export type ServedDevice = { readonly wire: WiredDevice; onBytes: (bytes: Uint8Array) => void };

/** What a way of serving gives back: what to tell the user, and how to end. */
export type Served = { readonly where: string; readonly stop: () => Promise<void> };

/** Bytes that wait for a slow reader of the stream; past that they are lost, as on a line. */
export const UNREAD_BYTES = 65_536;
