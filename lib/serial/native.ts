/**
 * A setting's place in a device: its key in the driver with numbers put in,
 * as `slots[4].placement.offsetPx`, `modes[3].timing.vertical.sync`, `native.fanPct`.
 */
export type NativeKey = string;

/** The value as the device holds it, before scale and offset. Texts are strings, all else whole numbers. */
export type NativeValue = number | string;

export type NativeValues = Readonly<Record<NativeKey, NativeValue>>;

export type NativeWrite = { readonly key: NativeKey; readonly value: NativeValue };
