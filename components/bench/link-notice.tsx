"use client";

import { Button } from "@/components/ui/button";
import { StopIcon } from "@/components/ui/finding-icon";
import { useBench, useBenchActions } from "@/components/bench/bench-provider";

/** What became of the link, and the way on; and the last notice of the bench. */
export function LinkNotice() {
  const link = useBench((state) => state.link);
  const notice = useBench((state) => state.notice);
  const kind = useBench((state) => state.device?.kind);
  const { reconnect, disconnect, dismissNotice } = useBenchActions();
  if (link.name === "lost") {
    return (
      <div role="alert" className="gutter flex flex-wrap items-center gap-3 border-b border-halt py-3">
        <StopIcon />
        <p className="min-w-[min(100%,20rem)] flex-1"><span className="font-strong text-halt">The device is out of reach.</span> {link.cause} Stored backups are safe. Plug it in again, then connect: what was written is read back first.</p>
        <Button kind="primary" onClick={() => void reconnect()}>{kind === "simulated" ? "Plug in and connect" : "Connect again"}</Button>
        <Button onClick={() => void disconnect()}>Disconnect</Button>
      </div>
    );
  }
  if (notice === null) return null;
  return (
    <div role={notice.tone === "halt" ? "alert" : "status"} className="gutter flex items-center gap-3 border-b border-line py-2.5">
      {notice.tone === "halt" ? <StopIcon /> : null}
      <p className={`flex-1 ${notice.tone === "halt" ? "text-halt" : ""}`}>{notice.text}</p>
      <Button size="small" onClick={dismissNotice}>Close</Button>
    </div>
  );
}
