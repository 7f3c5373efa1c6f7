"use client";

import { CautionIcon, StopIcon } from "@/components/ui/finding-icon";
import { isRasterAllowed } from "@/lib/profile/check/allowed-raster";
import { useBench } from "@/components/bench/bench-provider";

/** Until the raster was read and fits, the screen stays unplugged. */
export function UnplugCaution() {
  const reading = useBench((state) => state.reading);
  const screen = useBench((state) => state.screen);
  const raster = reading?.rasterOut ?? null;
  if (raster && screen.kind === "known" && isRasterAllowed(raster, screen.envelope)) return null;
  const isOut = raster !== null && screen.kind === "known";
  const why = !reading ? "The device's raster has not been read yet."
    : raster === null ? "The device puts out no raster that could be checked."
    : screen.kind === "known" ? `The raster that the device puts out is outside what ${screen.envelope.name} takes.`
    : "No screen is chosen, so the raster could not be checked against one.";
  return (
    <div role={isOut ? "alert" : "note"} className="gutter flex items-baseline gap-2.5 border-b border-line bg-sunk py-2.5">
      {isOut ? <StopIcon className="translate-y-[2px]" /> : <CautionIcon className="translate-y-[2px]" />}
      <p><span className="font-strong">Leave the screen unplugged.</span> {why} A signal above or below a CRT&apos;s range can damage it.</p>
    </div>
  );
}
