"use client";

import Link from "next/link";
import { useEffect, useMemo, useState } from "react";
import { useStore } from "zustand";
import { createListenCore } from "@/components/recordings/listen/listen-core";
import type { ListenCore } from "@/components/recordings/listen/listen-core";
import { heardRecording } from "@/components/recordings/listen/listened";
import { KeepPart } from "@/components/recordings/listen/keep-part";
import { OpenPart } from "@/components/recordings/listen/open-part";
import { SendPart } from "@/components/recordings/listen/send-part";
import { LineTable } from "@/components/recordings/line-table";
import { Button } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { formatCount, formatFigure } from "@/components/ui/figures";
import { PageHead, PartHead } from "@/components/ui/page-head";
import { createRealClock } from "@/lib/serial/clock/real-clock";

/** What a device that no driver is known for is called until it has a name. */
const UNKNOWN_SLUG = "unknown-device";

/** A line that is read and recorded, with a draft driver or with none: to get to know a device. Nothing is written through it. */
export function ListenView() {
  const [core, setCore] = useState<ListenCore | null>(null);
  useEffect(() => {
    // Ports are the browser's: the line begins after hydration.
    const made = createListenCore(createRealClock());
    queueMicrotask(() => setCore(made));
    return () => void made.stop();
  }, []);
  return (
    <div className="gutter flex flex-1 flex-col pb-8">
      <PageHead
        above={<Link href="/recordings" className="link">All recordings</Link>}
        title="Listen to a device"
        lead="Reads and records, with a driver or with none. No setting is written, no slot made active, nothing stored."
      />
      {core === null ? <p className="text-muted">Getting ready</p> : <Listening core={core} />}
    </div>
  );
}

function Listening({ core }: { readonly core: ListenCore }) {
  const { link, line, entries, said, progress } = useStore(core.store);
  const [slug, setSlug] = useState(UNKNOWN_SLUG);
  const heard = useMemo(() => heardRecording(entries, line, slug), [entries, line, slug]);
  const isOpen = link === "listening" || link === "opening";
  return (
    <div className="grid flex-1 grid-cols-1 gap-x-10 gap-y-6 border-t border-line pt-4 xl:grid-cols-[minmax(0,1fr)_minmax(0,420px)]">
      <section className="flex min-w-0 flex-col max-xl:order-last">
        <PartHead title="What was heard" aside={formatCount(entries.length, "line", "lines")} />
        {entries.length === 0 ? (
          <EmptyState title={isOpen ? "Nothing was heard yet" : "No line is open"}>
            Bytes stand here as they come, text and hex side by side.
          </EmptyState>
        ) : (
          <LineTable recording={heard} marked={[]} sight={null} />
        )}
      </section>
      <section className="min-w-0">
        <p role="status" className="mb-3 min-h-6">
          {link === "opening" ? "Opening the port and asking who is there." : ""}
          {progress === null ? "" : `Reading: ${progress.done} of ${progress.total} settings, ${formatFigure(progress.secondsLeft, "s", { decimals: 1 })} left.`}
          {progress === null && link !== "opening" ? said : ""}
        </p>
        {line?.kind === "driver" ? (
          <p className="mb-3">
            <span className="font-strong">{line.identity.maker} {line.identity.model}</span>, firmware{" "}
            <span className="figure">{line.identity.firmware}</span>, read with driver{" "}
            <span className="figure">{line.driver.definition.version}</span>.
          </p>
        ) : null}
        {isOpen ? (
          <div className="flex flex-wrap gap-3">
            {line?.kind === "driver" ? <Button disabled={progress !== null} onClick={() => void core.readAgain()}>Read everything again</Button> : null}
            <Button onClick={() => void core.stop()}>Stop</Button>
          </div>
        ) : (
          <OpenPart core={core} />
        )}
        {link === "listening" && line?.kind === "raw" ? <SendPart core={core} /> : null}
        {entries.length > 0 && !isOpen ? <KeepPart entries={entries} line={line} slug={slug} onSlug={setSlug} /> : null}
      </section>
    </div>
  );
}
