"use client";

import { useState } from "react";
import type { ListenCore } from "@/components/recordings/listen/listen-core";
import { Caution } from "@/components/recordings/listen/caution";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Segmented } from "@/components/ui/segmented";
import { pastedBytes } from "@/lib/serial/driver/command-words";

/** Bytes typed by hand onto a raw line, after a caution. They never go through a plan or a run. */
export function SendPart({ core }: { readonly core: ListenCore }) {
  const [isRead, setRead] = useState(false);
  const [as, setAs] = useState<"text" | "hex">("text");
  const [typed, setTyped] = useState("");
  const [problem, setProblem] = useState<string | undefined>(undefined);
  const onSend = () => {
    const bytes = pastedBytes(typed, as);
    const sent = typeof bytes === "string" ? bytes : core.send(bytes);
    if (typeof sent !== "string" && sent.ok) {
      setTyped("");
      setProblem(undefined);
    } else setProblem(typeof sent === "string" ? sent : sent.error);
  };
  return (
    <form
      className="mt-6 flex flex-col gap-3 border-t border-line pt-4"
      onSubmit={(event) => {
        event.preventDefault();
        if (isRead) onSend();
      }}
    >
      <h2 className="text-xl">Send by hand</h2>
      <Caution
        words="What you type goes to the device as it is: no check, no backup, no way back. Only ask; a wrong word can change or erase it. Unplug the screen first."
        isRead={isRead}
        onRead={setRead}
      />
      <Segmented label="Typed as" className="max-w-[200px]" value={as} onChange={setAs} choices={[{ value: "text", label: "Text" }, { value: "hex", label: "Hex" }]} />
      <TextField
        label="Bytes"
        className="figure"
        value={typed}
        error={problem}
        maxLength={1024}
        hint={as === "text" ? "\\r, \\n and \\x0D stand for bytes; no line end is added." : "Pairs of hex digits, as 2A 49 44 4E."}
        onChange={(event) => setTyped(event.target.value)}
      />
      <Button type="submit" kind="halt" className="self-start" disabled={!isRead || typed === ""}>Send</Button>
    </form>
  );
}
