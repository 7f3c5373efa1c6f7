"use client";

import { useMemo } from "react";
import type { ScreenOption } from "@/components/library/use-my-screen";
import { fitOf } from "@/components/screens/fit-words";
import { FigureTable } from "@/components/standards/figure-table";
import { modesHref } from "@/components/standards/modes-href";
import { documentWords, entryWords } from "@/components/standards/standard-rows";
import type { StandardsState } from "@/components/standards/standards-address";
import { Button, ButtonLink } from "@/components/ui/button";
import { SelectField } from "@/components/ui/field";
import { FindingWord } from "@/components/ui/finding-icon";
import { PageHead } from "@/components/ui/page-head";
import { Segmented } from "@/components/ui/segmented";
import { useCopy } from "@/components/ui/use-copy";
import { ModeGlyph } from "@/components/video/mode-glyph";
import { TracePair } from "@/components/video/trace-pair";
import { catalogue } from "@/lib/timing/catalogue/catalogue";
import type { CatalogueRecord } from "@/lib/timing/catalogue/search-catalogue";
import { formatModeline } from "@/lib/timing/modeline/format-modeline";

export type CompareViewProps = {
  readonly left: CatalogueRecord;
  readonly right: CatalogueRecord;
  readonly laid: StandardsState["laid"];
  readonly screen: ScreenOption;
  readonly options: readonly ScreenOption[];
  readonly onChange: (change: Partial<StandardsState>) => void;
  readonly onBack: () => void;
};

const laidChoices = [
  { value: "under", label: "Under each other" },
  { value: "over", label: "Over each other" },
] as const;

/** Two published rasters side by side: waveforms on one scale, every figure, and what the screen says to each. */
export function CompareView({ left, right, laid, screen, options, onChange, onBack }: CompareViewProps) {
  return (
    <div className="gutter flex flex-1 flex-col pb-10">
      <PageHead
        title="Compare two standards"
        above={
          <button type="button" className="link" onClick={onBack}>
            Standards
          </button>
        }
        acts={
          <Segmented
            label="Waveforms"
            value={laid}
            choices={laidChoices}
            onChange={(next) => onChange({ laid: next })}
            className="whitespace-nowrap"
          />
        }
      />
      <Choices left={left} right={right} screen={screen} options={options} onChange={onChange} />
      <div className="-mx-4 grid flex-1 grid-cols-1 md:-mx-7 xl:grid-cols-[minmax(0,1fr)_minmax(0,640px)]">
        <div className="flex flex-col gap-6 px-4 pt-5 md:px-7 xl:border-r xl:border-line">
          <TracePair of="line" left={left} right={right} laid={laid} />
          <TracePair of="field" left={left} right={right} laid={laid} />
          <div className="divide-y divide-line border-t border-line">
            <Entry entry={left} screen={screen} />
            <Entry entry={right} screen={screen} />
          </div>
        </div>
        <div className="min-w-0 px-4 pt-5 md:px-7">
          <FigureTable left={left} right={right} />
        </div>
      </div>
    </div>
  );
}

function Choices({ left, right, screen, options, onChange }: Omit<CompareViewProps, "laid" | "onBack">) {
  const entries = useMemo(() => catalogue.map((entry) => ({ value: entry.id, label: entryWords(entry) })), []);
  return (
    <div className="grid grid-cols-1 gap-x-4 gap-y-3 border-y border-line py-4 md:grid-cols-3">
      <SelectField
        label="Left, solid"
        options={entries}
        value={left.id}
        onChange={(event) => onChange({ picked: [event.target.value, right.id] })}
      />
      <SelectField
        label="Right, dashed"
        options={entries}
        value={right.id}
        onChange={(event) => onChange({ picked: [left.id, event.target.value] })}
      />
      <SelectField
        label="Hold against"
        options={options}
        value={screen.value}
        onChange={(event) => onChange({ screen: event.target.value })}
      />
    </div>
  );
}

type EntryProps = {
  readonly entry: CatalogueRecord;
  readonly screen: ScreenOption;
};

function Entry({ entry, screen }: EntryProps) {
  const { envelope } = screen;
  const copy = useCopy();
  const modeline = formatModeline(entry.timing);
  const fit = envelope === null ? null : fitOf(entry.timing, envelope);
  return (
    <section aria-label={entryWords(entry)} className="py-3">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <ModeGlyph timing={entry.timing} decorative />
        <h2 className="text-lg">{entry.name}</h2>
        <span className="mr-auto text-sm text-muted">
          {documentWords(entry)}
          {entry.note === undefined ? "" : `; ${entry.note}`}
        </span>
        <ButtonLink size="small" href={modesHref(entry.timing, screen)}>
          Open in Modes
        </ButtonLink>
        <Button size="small" onClick={() => copy(modeline, `modeline of ${entry.name}`)}>
          Copy modeline
        </Button>
      </div>
      {fit === null || envelope === null ? null : (
        <p className="mt-1">
          <FindingWord severity={fit.fits ? "fits" : "stop"}>
            {fit.fits ? `fits ${envelope.name}` : `does not fit ${envelope.name}: ${fit.words}`}
          </FindingWord>
        </p>
      )}
      <p className="figure mt-1 break-words text-muted">{modeline}</p>
    </section>
  );
}
