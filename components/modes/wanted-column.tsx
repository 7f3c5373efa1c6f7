"use client";

import type { ReactNode } from "react";
import { Segmented } from "@/components/ui/segmented";
import { PartHead } from "@/components/ui/page-head";
import { Button } from "@/components/ui/button";
import { FigureField } from "@/components/modes/figure-field";
import { KeepBox } from "@/components/modes/keep-box";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import { PartTables } from "@/components/modes/part-tables";
import { followsSource } from "@/components/modes/store/answer";
import type { KeptFigure, StatedFigure } from "@/components/modes/store/choices";
import { figureText, figureWithUnit, figureWords } from "@/components/modes/store/figure-words";
import type { TypedFigure } from "@/components/modes/store/acts";
import { activeFrameLines } from "@/lib/timing/rates";
import { editableFigures } from "@/lib/timing/fit/editable-figures";
import type { RasterTiming } from "@/lib/timing/raster";

/** What is wanted, figure by figure; what is kept; and the blanking of the raster in hand. */
export function WantedColumn() {
  const byHand = useModes((state) => state.choices.byHand);
  const hand = useModes((state) => state.answer?.hand?.timing ?? null);
  const { backToBest } = useModesActs();
  return (
    <section aria-labelledby="wanted-head" className="gutter border-line py-4 max-lg:border-b lg:border-r lg:pr-6">
      <PartHead id="wanted-head" title="Wanted" />
      {byHand ? (
        <div className="border-l-3 mb-2 border-lamp pl-3 text-sm">
          <p>This raster is made by hand: what you type changes it, and as little else as possible.</p>
          <Button size="small" className="mt-1.5" onClick={backToBest}>
            Back to what fits best
          </Button>
        </div>
      ) : null}
      <WishRows hand={hand} />
      {hand === null ? null : <PartTables timing={hand} />}
    </section>
  );
}

function WishRows({ hand }: { readonly hand: RasterTiming | null }) {
  const choices = useModes((state) => state.choices);
  const { wish, stated } = choices;
  const follows = followsSource(choices);
  const figures = hand === null ? null : editableFigures(hand);
  const clock = stated.pixelClockHz ?? figures?.pixelClockHz;
  return (
    <>
      <FigureRow
        figure="activeLines"
        keeps="activeLines"
        value={wish.activeLines}
        got={hand === null ? undefined : activeFrameLines(hand)}
      />
      <FigureRow
        figure="fieldRateHz"
        keeps="fieldRateHz"
        value={follows && choices.source !== null ? choices.source.fieldRateHz : wish.fieldRateHz}
        got={figures?.fieldRateHz}
        disabled={follows}
        note={follows ? "the source’s" : undefined}
      />
      <FigureRow figure="activePx" keeps="activePx" value={wish.activePx} got={figures?.activePx} />
      <ScanRow />
      {clock === undefined ? null : <FigureRow figure="pixelClockHz" keeps="pixelClockHz" value={clock} />}
    </>
  );
}

type RowProps = {
  readonly figure: TypedFigure;
  readonly keeps: KeptFigure | StatedFigure;
  readonly value: number;
  /** What the raster in hand has instead, told where it differs. */
  readonly got?: number | undefined;
  readonly disabled?: boolean;
  readonly note?: string | undefined;
};

function FigureRow({ figure, keeps, value, got, disabled, note }: RowProps) {
  const differs = got !== undefined && figureText(figure, got) !== figureText(figure, value);
  return (
    <Row label={figureWords[figure].label} keep={<KeepBox figure={keeps} />}>
      <FigureField figure={figure} value={value} disabled={disabled} />
      {differs || note !== undefined ? (
        <span className="figure mt-0.5 block text-right text-muted">
          {note ?? `gets ${figureWithUnit(figure, got ?? value)}`}
        </span>
      ) : null}
    </Row>
  );
}

function ScanRow() {
  const interlaced = useModes((state) => state.choices.wish.interlaced);
  const { scan } = useModesActs();
  return (
    <Row label="Scan" keep={<KeepBox figure="interlaced" />} isStacked>
      <Segmented
        label="Scan"
        value={interlaced ? "interlaced" : "progressive"}
        onChange={(value) => scan(value === "interlaced")}
        choices={[
          { value: "progressive", label: "Progressive" },
          { value: "interlaced", label: "Interlaced" },
        ]}
      />
    </Row>
  );
}

function Row({
  label,
  keep,
  isStacked = false,
  children,
}: {
  readonly label: string;
  readonly keep: ReactNode;
  readonly isStacked?: boolean;
  readonly children: ReactNode;
}) {
  return (
    <div
      className={
        isStacked
          ? "border-b border-line py-2"
          : "grid grid-cols-[1fr_136px] items-center gap-x-3 border-b border-line py-2"
      }
    >
      <div className={isStacked ? "mb-1.5 flex items-center justify-between" : undefined}>
        <span className="block font-[500]">{label}</span>
        {keep}
      </div>
      <div className="min-w-0">{children}</div>
    </div>
  );
}
