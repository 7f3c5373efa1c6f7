"use client";

import { NoticeList } from "@/components/drivers/notice-list";
import { useBench } from "@/components/bench/bench-provider";

/** Tells of another version of this device's driver. A move acts when the device is connected next. */
export function DriverNotice() {
  const deviceId = useBench((state) => state.device?.stored?.id ?? null);
  const isRunning = useBench((state) => state.run !== null || state.review !== null);
  // A run keeps the driver that its plan was made with, and wants no other question on the page.
  if (deviceId === null || isRunning) return null;
  return <NoticeList deviceId={deviceId} className="gutter" hint="A move acts when you connect the device next." />;
}
