"use client";

import { SelectField } from "@/components/ui/field";
import { Button } from "@/components/ui/button";
import type { SourceFormat } from "@/lib/timing/raster";
import { FaultPanel } from "@/components/bench/fault-panel";
import { useBench, useBenchActions } from "@/components/bench/bench-provider";

const FORMATS: readonly { readonly label: string; readonly format: SourceFormat }[] = [
  { label: "720 × 480, progressive, 59.94 Hz", format: { activePx: 720, activeLines: 480, interlaced: false, fieldRateHz: 59.94 } },
  { label: "1280 × 720, progressive, 60 Hz", format: { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 } },
  { label: "1920 × 1080, progressive, 60 Hz", format: { activePx: 1920, activeLines: 1080, interlaced: false, fieldRateHz: 60 } },
  { label: "1280 × 720, progressive, 50 Hz", format: { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 50 } },
];
const NOTHING = "nothing";

function keyOf(format: SourceFormat | null): string {
  const at = FORMATS.findIndex((one) => format !== null && one.format.activeLines === format.activeLines && one.format.fieldRateHz === format.fieldRateHz);
  return at < 0 ? NOTHING : String(at);
}

/** What only a simulated device allows: another source, its plug, its power. */
export function SimulatedControls() {
  const device = useBench((state) => state.device);
  const arriving = useBench((state) => state.reading?.arriving ?? null);
  const isFree = useBench((state) => state.activity === "idle" && state.link.name === "ready");
  const { setSource, switchOffAndOn, pullCable } = useBenchActions();
  if (device?.kind !== "simulated") return null;
  return (
    <section aria-label="Simulated device" className="mt-4 border-t border-line pt-3">
      <SelectField
        label="What the simulated source sends" value={keyOf(arriving?.format ?? null)} disabled={!isFree}
        onChange={(event) => setSource(FORMATS[Number(event.target.value)]?.format ?? null)}
        options={[...FORMATS.map(({ label }, index) => ({ value: String(index), label })), { value: NOTHING, label: "Nothing" }]}
      />
      <div className="mt-2.5 flex flex-wrap gap-2.5">
        <Button size="small" onClick={switchOffAndOn}>Switch it off and on</Button>
        <Button size="small" onClick={pullCable}>Pull the cable</Button>
      </div>
      <FaultPanel />
    </section>
  );
}
