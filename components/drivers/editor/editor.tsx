"use client";

import Link from "next/link";
import { useEffect, useId, useMemo, useRef, useState } from "react";
import { ConformancePart } from "@/components/drivers/conformance-part";
import { CodeArea, showLine } from "@/components/drivers/editor/code-area";
import { pathAt } from "@/components/drivers/editor/json-places";
import { EditorFoot } from "@/components/drivers/editor/editor-foot";
import { FieldHelpPart } from "@/components/drivers/editor/field-help-part";
import { LiveViewPart } from "@/components/drivers/editor/live-view-part";
import { ProblemList } from "@/components/drivers/editor/problem-list";
import { readText, textOf } from "@/components/drivers/editor/reading";
import { StaleNotice } from "@/components/drivers/editor/stale-notice";
import { useDraft } from "@/components/drivers/editor/use-draft";
import { stateWords } from "@/components/drivers/driver-words";
import { TextField } from "@/components/ui/field";
import { PageHead } from "@/components/ui/page-head";
import { TabPages } from "@/components/ui/segmented";
import type { DriverVersionDetail } from "@/lib/contracts/driver";

/** The text is read again when nobody has typed for so long. */
const TYPING_MS = 250;

/** What was typed, once nobody has typed for a moment. */
function useSettledText(text: string): string {
  const [settled, setSettled] = useState(text);
  useEffect(() => {
    if (text === settled) return undefined;
    const timer = setTimeout(() => setSettled(text), TYPING_MS);
    return () => clearTimeout(timer);
  }, [text, settled]);
  return settled;
}

type Part = "bytes" | "help" | "conformance";

/** A draft as text, with what the page makes of it beside it. */
export function Editor({ begun, current }: { readonly begun: DriverVersionDetail; readonly current: DriverVersionDetail }) {
  const area = useRef<HTMLTextAreaElement>(null);
  const problemsId = useId();
  const [text, setText] = useState(() => textOf(begun.definition));
  const [note, setNote] = useState(begun.note);
  const [caret, setCaret] = useState(0);
  const [part, setPart] = useState<Part>("bytes");
  const settled = useSettledText(text);
  const reading = useMemo(() => readText(settled), [settled]);
  const draft = useDraft(begun, { text, note });
  const badLines = useMemo(() => new Set(reading.problems.flatMap(({ line }) => line ?? [])), [reading]);
  const path = useMemo(() => pathAt(reading.places, caret), [reading, caret]);
  const { slug, version } = begun;
  const stands = draft.base;
  return (
    <div className="flex flex-1 flex-col">
      <div className="gutter">
        <PageHead
          above={<Link href={`/drivers/${slug}?version=${version}`} className="link">Driver {slug}</Link>}
          title={`Version ${version}, ${stateWords[stands.state]}`}
          acts={<TextField label="Note for owners" fieldClassName="w-[min(100%,420px)] min-w-[280px]" value={note} maxLength={2000} onChange={(event) => setNote(event.target.value)} />}
        />
        {draft.stale === null ? null : <StaleNotice draft={draft} text={text} onTake={(theirs) => { setText(textOf(theirs.definition)); setNote(theirs.note); }} />}
      </div>
      <div className="grid flex-1 grid-cols-1 border-t border-line lg:grid-cols-2 lg:grid-rows-[minmax(0,1fr)]">
        <section aria-label="Definition" className="flex min-w-0 flex-col border-line lg:h-[calc(100dvh-230px)] lg:min-h-[520px] lg:border-r">
          <CodeArea ref={area} label="Definition" value={text} onChange={setText} onCaret={setCaret} badLines={badLines} describedBy={problemsId} />
          <ProblemList
            id={problemsId}
            problems={reading.problems}
            onLine={(line) => {
              if (area.current !== null) showLine(area.current, line);
            }}
          />
        </section>
        <section aria-label="What it does" className="min-w-0 px-4 pb-6 pt-1 md:px-7 lg:h-[calc(100dvh-230px)] lg:min-h-[520px] lg:overflow-y-auto" tabIndex={0}>
          <TabPages<Part>
            label="What it does"
            value={part}
            onChange={setPart}
            pages={[
              { value: "bytes", label: "Bytes", content: <LiveViewPart driver={reading.driver} /> },
              { value: "help", label: "Fields", content: <FieldHelpPart path={path} /> },
              { value: "conformance", label: "Conformance", content: <ConformancePart reportId={current.report?.id ?? null} /> },
            ]}
          />
        </section>
      </div>
      <EditorFoot draft={draft} reading={reading} isRead={settled === text} note={note} current={current} onReport={() => setPart("conformance")} />
    </div>
  );
}
