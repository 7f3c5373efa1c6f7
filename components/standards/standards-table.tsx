"use client";

import { AudioWaveform, Copy } from "lucide-react";
import Link from "next/link";
import { useMemo } from "react";
import type { ScreenOption } from "@/components/library/use-my-screen";
import { modesHref } from "@/components/standards/modes-href";
import { documentWords, entryWords } from "@/components/standards/standard-rows";
import type { StandardRow } from "@/components/standards/standard-rows";
import type { Order, StandardsState } from "@/components/standards/standards-address";
import { IconButton } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { DataTable } from "@/components/ui/data-table";
import type { DataColumn } from "@/components/ui/data-table";
import { formatFieldRate, formatLineRate, formatNumber } from "@/components/ui/figures";
import { FindingWord } from "@/components/ui/finding-icon";
import { useCopy } from "@/components/ui/use-copy";
import { useWidth } from "@/components/ui/use-width";
import { ModeGlyph } from "@/components/video/mode-glyph";
import { formatModeline } from "@/lib/timing/modeline/format-modeline";
import { horizontalUs, linesPerField, lineTotal } from "@/lib/timing/rates";

type Column = DataColumn<StandardRow> & { readonly id: Order | "pick" | "acts" };

const figure = (text: string) => <span className="figure whitespace-nowrap">{text}</span>;

/** A column of one figure, right-aligned; a phone leaves out what the comparison shows. */
function figureColumn(
  id: Order,
  header: string,
  value: (row: StandardRow) => number,
  text: (value: number) => string,
  phone: Column["phone"] = "plain",
): Column {
  return { id, header, align: "end", phone, sortBy: value, cell: (row) => figure(text(value(row))) };
}

const us = (value: number) => formatNumber(value, { decimals: 2 });
const count = (value: number) => formatNumber(value, { decimalsAtMost: 1 });

const nameColumn: Column = {
  id: "name",
  header: "Raster",
  phone: "head",
  sortBy: (row) => row.name,
  cell: (row) => (
    <span className="flex items-center gap-1">
      <ModeGlyph timing={row.timing} decorative />
      <span>
        <span className="block whitespace-nowrap font-strong">{row.name}</span>
        {row.code !== undefined || row.note === undefined ? null : (
          // Of a numbered format the columns say it: its note is the line count.
          <span className="block text-sm text-muted md:max-w-44">{row.note}</span>
        )}
      </span>
    </span>
  ),
};

const figureColumns: readonly Column[] = [
  figureColumn(
    "line",
    "Line rate",
    (row) => row.lineRateHz,
    (hz) => formatLineRate(hz),
  ),
  figureColumn(
    "field",
    "Field rate",
    (row) => row.fieldRateHz,
    (hz) => formatFieldRate(hz),
  ),
  figureColumn("lineTotal", "Clocks", (row) => lineTotal(row.timing), count),
  figureColumn("fieldLines", "Lines", (row) => linesPerField(row.timing), count),
  figureColumn(
    "clock",
    "Clock, MHz",
    (row) => row.timing.pixelClockHz / 1e6,
    (mhz) => formatNumber(mhz, { decimals: 3 }),
  ),
  figureColumn("front", "Front, µs", (row) => horizontalUs(row.timing).frontPorch, us),
  figureColumn("sync", "Sync, µs", (row) => horizontalUs(row.timing).sync, us),
  figureColumn("back", "Back, µs", (row) => horizontalUs(row.timing).backPorch, us),
  figureColumn("picture", "Picture, µs", (row) => horizontalUs(row.timing).active, us, "hidden"),
];

const fitsColumn: Column = {
  id: "fits",
  header: "On the screen",
  sortBy: (row) => (row.fit === null ? undefined : row.fit.fits ? " " : row.fit.short),
  cell: ({ fit }) =>
    fit === null ? null : (
      <FindingWord severity={fit.fits ? "fits" : "stop"}>
        {fit.fits ? (
          "fits"
        ) : (
          <span className="font-normal text-muted" title={fit.words}>
            {fit.short}
          </span>
        )}
      </FindingWord>
    ),
};

/** Columns that a narrower table leaves out, by the width in px that it needs to have them. */
const roomFor: Readonly<Partial<Record<Column["id"], number>>> = {
  clock: 1480,
  front: 1240,
  back: 1240,
  picture: 1240,
  lineTotal: 980,
  fieldLines: 980,
  sync: 980,
  field: 800,
};
/** A phone stands rows as blocks, which have room for all. */
const BLOCKS_UP_TO_PX = 703;

const hasRoom = (column: Column, widthPx: number) => widthPx <= BLOCKS_UP_TO_PX || widthPx >= (roomFor[column.id] ?? 0);

function useColumns(picked: readonly string[], screen: ScreenOption, onPick: (id: string) => void): readonly Column[] {
  const copy = useCopy();
  return useMemo(() => {
    const pickColumn: Column = {
      id: "pick",
      header: "Compare",
      hideHeader: true,
      phone: "bare",
      cell: (row) => (
        <Checkbox
          label={<span className="md:sr-only">Compare {entryWords(row)}</span>}
          checked={picked.includes(row.id)}
          onChange={() => onPick(row.id)}
        />
      ),
    };
    const documentColumn: Column = {
      id: "document",
      header: "Document",
      sortBy: (row) => `${row.document} ${row.code ?? 0}`,
      cell: (row) => (
        <span className={row.code === undefined ? undefined : "xl:whitespace-nowrap"}>
          {documentWords(row)}{" "}
          <span className="figure ml-1 whitespace-nowrap text-muted">{row.aspect.replace(":", " : ")}</span>
        </span>
      ),
    };
    const actsColumn: Column = {
      id: "acts",
      header: "Acts",
      hideHeader: true,
      align: "end",
      phone: "bare",
      cell: (row) => (
        <span className="inline-flex">
          <Link
            href={modesHref(row.timing, screen)}
            aria-label={`Open in Modes: ${entryWords(row)}`}
            title="Open in Modes"
            className="inline-flex size-9 items-center justify-center rounded-control border border-transparent text-muted hover:border-edge hover:text-text"
          >
            <AudioWaveform aria-hidden size={16} />
          </Link>
          <IconButton
            label={`Copy modeline of ${entryWords(row)}`}
            onClick={() => copy(formatModeline(row.timing), `modeline of ${row.name}`)}
          >
            <Copy aria-hidden size={16} />
          </IconButton>
        </span>
      ),
    };
    return [
      pickColumn,
      nameColumn,
      documentColumn,
      ...figureColumns,
      ...(screen.envelope === null ? [] : [fitsColumn]),
      actsColumn,
    ];
  }, [picked, screen, onPick, copy]);
}

export type StandardsTableProps = {
  readonly rows: readonly StandardRow[];
  readonly screen: ScreenOption;
  readonly state: StandardsState;
  readonly onPick: (id: string) => void;
  readonly onOrder: (order: StandardsState["order"]) => void;
};

/** The published rasters with their figures; a tick takes one into the comparison. */
export function StandardsTable({ rows, screen, state, onPick, onOrder }: StandardsTableProps) {
  const [attach, widthPx] = useWidth(1384);
  const all = useColumns(state.picked, screen, onPick);
  const columns = useMemo(() => all.filter((column) => hasRoom(column, widthPx)), [all, widthPx]);
  return (
    <div ref={attach}>
      <DataTable
        caption="Published rasters"
        columns={columns}
        rows={rows}
        rowKey={(row) => row.id}
        sorting={state.order}
        // A column that does not sort cannot be asked for.
        onSorting={({ id, desc }) => onOrder({ id: id as Order, desc })}
        isMarked={(row) => state.picked.includes(row.id)}
      />
    </div>
  );
}
