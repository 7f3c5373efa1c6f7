"use client";

import Link from "next/link";
import { SignalChain, type Station } from "@/components/video/signal-chain";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatFieldRate, formatLineRate, formatNumber } from "@/components/ui/figures";
import { formatAgo } from "@/components/ui/moments";
import { isRasterAllowed } from "@/lib/profile/check/allowed-raster";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { useBench } from "@/components/bench/bench-provider";
import type { BenchScreen, DeviceReading } from "@/components/bench/store/types";

function scanWords(lines: number, interlaced: boolean): string {
  return `${lines} lines, ${interlaced ? "interlaced" : "progressive"}`;
}

function inputStation(reading: DeviceReading | null): Station {
  const arriving = reading?.arriving;
  const format: SourceFormat | null = arriving?.format ?? null;
  if (!format) return { eyebrow: "In", title: "Nothing arrives", figures: arriving ? [arriving.input] : [] };
  return {
    eyebrow: "In", title: `${formatNumber(format.activePx)} × ${formatNumber(format.activeLines)}, ${format.interlaced ? "interlaced" : "progressive"}`,
    figures: [formatFieldRate(format.fieldRateHz), arriving?.input ?? "", arriving?.locked ? "locked" : "not locked"],
  };
}

function outputStation(raster: RasterTiming | null, screen: BenchScreen): Station {
  const eyebrow = screen.kind === "known" ? <>Out to <Link className="link" href="/screens">{screen.envelope.name}</Link></> : "Out to a screen that is not chosen";
  if (!raster) return { eyebrow, title: "Nothing leaves", figures: ["leave the screen unplugged"] };
  const lines = raster.interlaced ? raster.vertical.active * 2 : raster.vertical.active;
  const fits = screen.kind === "known" ? isRasterAllowed(raster, screen.envelope) : null;
  return {
    eyebrow,
    title: <>{scanWords(lines, raster.interlaced)} {fits === null ? null : <FindingWord severity={fits ? "fits" : "stop"}>{fits ? "in range" : "out of range"}</FindingWord>}</>,
    figures: [formatLineRate(lineRateHz(raster)), formatFieldRate(fieldRateHz(raster))],
  };
}

/** In → Device → Out to a screen, from what the device said last. */
export function BenchChain() {
  const device = useBench((state) => state.device);
  const reading = useBench((state) => state.reading);
  const backup = useBench((state) => state.backup);
  const screen = useBench((state) => state.screen);
  const nowMs = useBench((state) => state.nowMs);
  if (!device) return null;
  const { identity, driver } = device;
  const station: Station = {
    eyebrow: device.kind === "simulated" ? "Device, simulated" : "Device",
    title: <>{identity.maker} {identity.model} <span className="font-[500] text-muted">{device.stored?.name ?? ""}</span></>,
    figures: [
      `firmware ${identity.firmware}`, identity.serialNumber === undefined ? "no serial number" : `serial ${identity.serialNumber}`,
      `${formatNumber(driver.transport.baudRate)} baud`, backup ? `backed up ${formatAgo(new Date(backup.takenAt), new Date(nowMs))}` : "not backed up",
    ],
  };
  const flows = { in: reading?.arriving?.format !== null && reading?.arriving !== null, out: reading?.rasterOut !== null && reading !== null };
  return <SignalChain input={inputStation(reading)} device={station} output={outputStation(reading?.rasterOut ?? null, screen)} flows={flows} />;
}
