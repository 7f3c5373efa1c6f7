"use client";

import { useState } from "react";
import { useStore } from "zustand";
import { hostSystem, portFailureOf, portHelp } from "@/components/bench/port-help";
import type { ListenCore } from "@/components/recordings/listen/listen-core";
import { Caution } from "@/components/recordings/listen/caution";
import { LineFields, FIRST_LINE_SETTINGS } from "@/components/recordings/listen/line-fields";
import { DriverFields, useChosenDriver } from "@/components/recordings/listen/driver-fields";
import { useRecordingLines, useRecordings } from "@/components/recordings/use-recordings";
import { Button } from "@/components/ui/button";
import { SelectField } from "@/components/ui/field";
import { StopIcon } from "@/components/ui/finding-icon";
import { Segmented } from "@/components/ui/segmented";
import type { SerialLike, SerialPortLike } from "@/lib/serial/port";

type Way = "driver" | "raw" | "recording";

/** The browser's ports. The W3C interface fits ours by structure; its DOM types are wider than what we use. */
function serialOf(): SerialLike | null {
  return "serial" in navigator ? (navigator.serial as unknown as SerialLike) : null;
}

/** Chooses a port, and with what it is read. */
export function OpenPart({ core }: { readonly core: ListenCore }) {
  const failure = useStore(core.store, (state) => state.failure);
  const [way, setWay] = useState<Way>("driver");
  const help = failure === null ? null : portHelp(failure, hostSystem(navigator.userAgent));
  return (
    <>
      {help === null ? null : (
        <div role="alert" className="mb-4 border-t-2 border-halt pt-3">
          <p className="flex items-center gap-2 text-halt"><StopIcon /><strong>{help.title}</strong></p>
          <ul className="mt-1 list-disc pl-5">{help.causes.map((cause) => <li key={cause}>{cause}</li>)}</ul>
        </div>
      )}
      <Segmented
        label="Read with"
        className="mb-4"
        value={way}
        onChange={setWay}
        choices={[
          { value: "driver", label: "A driver" },
          { value: "raw", label: "No driver" },
          { value: "recording", label: "A recording as the device" },
        ]}
      />
      {way === "driver" ? <WithDriver core={core} /> : null}
      {way === "raw" ? <WithNone core={core} /> : null}
      {way === "recording" ? <WithRecording core={core} /> : null}
    </>
  );
}

/** Asks for a port, from a click, and hands it on. */
async function withPort(core: ListenCore, onPort: (port: SerialPortLike) => Promise<void>): Promise<void> {
  const serial = serialOf();
  if (serial === null) return core.store.setState({ failure: { code: isSecureContext ? "no-web-serial" : "insecure-context" } });
  let port: SerialPortLike;
  try {
    port = await serial.requestPort();
  } catch (error) {
    return core.store.setState({ failure: portFailureOf(error) });
  }
  await onPort(port);
}

function WithDriver({ core }: { readonly core: ListenCore }) {
  const chosen = useChosenDriver();
  const [isRead, setRead] = useState(false);
  const { driver, state } = chosen;
  const isDraft = state === "draft" || state === "conformance";
  return (
    <div className="flex flex-col items-start gap-3">
      <DriverFields chosen={chosen} />
      {isDraft ? (
        <Caution words="A wrong draft can ask with words that the device takes as an order. Unplug the screen, and write down what matters first." isRead={isRead} onRead={setRead} />
      ) : null}
      <Button kind="primary" disabled={driver === null || (isDraft && !isRead)} onClick={() => void withPort(core, (port) => (driver === null ? Promise.resolve() : core.readWith(port, driver)))}>
        Choose a port
      </Button>
    </div>
  );
}

function WithNone({ core }: { readonly core: ListenCore }) {
  const [options, setOptions] = useState(FIRST_LINE_SETTINGS);
  return (
    <div className="flex flex-col items-start gap-3">
      <p className="text-muted">Everything that comes is kept. Nothing leaves by itself: only what you type afterwards, byte for byte.</p>
      <LineFields options={options} onChange={setOptions} />
      <Button kind="primary" onClick={() => void withPort(core, (port) => core.listenRaw(port, options))}>Choose a port</Button>
    </div>
  );
}

function WithRecording({ core }: { readonly core: ListenCore }) {
  const chosen = useChosenDriver();
  const recordings = useRecordings(chosen.slug, chosen.slug !== null);
  const rows = recordings.data?.pages.flatMap((page) => page.items) ?? [];
  const [wanted, setWanted] = useState("");
  const id = rows.find((row) => row.id === wanted)?.id ?? rows[0]?.id ?? null;
  const lines = useRecordingLines(id);
  const { driver } = chosen;
  const recording = lines.data;
  return (
    <div className="flex flex-col items-start gap-3">
      <p className="text-muted">The recording answers as the device did. At the first byte that the driver says differently the line ends, and it says where.</p>
      <DriverFields chosen={chosen} />
      <SelectField
        label="Recording"
        fieldClassName="w-full max-w-[380px]"
        value={id ?? ""}
        onChange={(event) => setWanted(event.target.value)}
        options={rows.length === 0 ? [{ value: "", label: "there is none of this model" }] : rows.map((row) => ({ value: row.id, label: row.name }))}
      />
      <Button kind="primary" disabled={driver === null || recording === undefined} onClick={() => {
        if (driver !== null && recording !== undefined) void core.replay(recording, driver);
      }}>
        Replay
      </Button>
    </div>
  );
}
