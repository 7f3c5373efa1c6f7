"use client";

import { SelectField, TextField } from "@/components/ui/field";
import type { SerialOpenOptions, SerialParity } from "@/lib/serial/port";

/** Common practice of devices with such a port, no source. */
export const FIRST_LINE_SETTINGS: SerialOpenOptions = { baudRate: 115_200, dataBits: 8, parity: "none", stopBits: 1, flowControl: "none" };

const PARITIES: readonly SerialParity[] = ["none", "even", "odd"];
const choices = (values: readonly (string | number)[]) => values.map((value) => ({ value: String(value), label: String(value) }));

/** How a line is set that no driver speaks for. */
export function LineFields({ options, onChange }: { readonly options: SerialOpenOptions; readonly onChange: (options: SerialOpenOptions) => void }) {
  return (
    <div className="grid w-full grid-cols-2 gap-3 sm:grid-cols-4">
      <TextField label="Baud" type="number" min={300} max={4_000_000} className="figure" value={options.baudRate} onChange={(event) => onChange({ ...options, baudRate: Math.max(300, Math.round(event.target.valueAsNumber) || 300) })} />
      <SelectField label="Data bits" value={String(options.dataBits)} options={choices([8, 7])} onChange={(event) => onChange({ ...options, dataBits: event.target.value === "7" ? 7 : 8 })} />
      <SelectField label="Parity" value={options.parity} options={choices(PARITIES)} onChange={(event) => onChange({ ...options, parity: PARITIES.find((parity) => parity === event.target.value) ?? "none" })} />
      <SelectField label="Stop bits" value={String(options.stopBits)} options={choices([1, 2])} onChange={(event) => onChange({ ...options, stopBits: event.target.value === "2" ? 2 : 1 })} />
    </div>
  );
}
