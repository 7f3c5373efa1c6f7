"use client";

import {
  createColumnHelper,
  createSortedRowModel,
  rowSortingFeature,
  tableFeatures,
  useTable,
} from "@tanstack/react-table";
import { ArrowDown, ArrowUp } from "lucide-react";
import { useMemo, useState } from "react";
import type { ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

export type DataColumn<Row> = {
  readonly id: string;
  readonly header: string;
  /** For columns that explain themselves: the header is there for assistive technology alone. */
  readonly hideHeader?: boolean;
  /** What the column sorts by; without it the column does not sort. Undefined values come last. */
  readonly sortBy?: (row: Row) => string | number | undefined;
  readonly cell: (row: Row) => ReactNode;
  readonly align?: "start" | "end";
  /** On a phone: `head` leads the row, `hidden` leaves it out, `bare` stands alone; else its header stands beside it. */
  readonly phone?: "head" | "plain" | "bare" | "hidden";
  readonly className?: string;
};

export type Sorting = { readonly id: string; readonly desc: boolean };

export type DataTableProps<Row> = {
  /** What the table lists, for assistive technology. */
  readonly caption: string;
  readonly columns: readonly DataColumn<Row>[];
  readonly rows: readonly Row[];
  readonly rowKey: (row: Row) => string;
  readonly sorting?: Sorting;
  /** Told when another order is chosen; the table keeps it by itself. */
  readonly onSorting?: (sorting: Sorting) => void;
  /** A row that stands out: the chosen, the pinned. */
  readonly isMarked?: (row: Row) => boolean;
  /** For the pointer alone: what a click anywhere in a row does. A button in the row does it for everybody. */
  readonly onRow?: (row: Row) => void;
};

const features = tableFeatures({ rowSortingFeature, sortedRowModel: createSortedRowModel() });

function compare(a: unknown, b: unknown): number {
  if (typeof a === "number" && typeof b === "number") return a - b;
  return String(a).localeCompare(String(b), "en-GB", { numeric: true, sensitivity: "base" });
}

/** A dense table with rules, a sticky head and columns that sort; on a phone each row stands as a small block. */
export function DataTable<Row extends object>({
  caption,
  columns,
  rows,
  rowKey,
  sorting: initial,
  onSorting,
  isMarked,
  onRow,
}: DataTableProps<Row>) {
  const [sorting, setSorting] = useState(initial === undefined ? [] : [{ id: initial.id, desc: initial.desc }]);
  const order = ({ id, desc }: Sorting) => {
    setSorting([{ id, desc }]);
    onSorting?.({ id, desc });
  };
  const defs = useMemo(() => {
    const helper = createColumnHelper<typeof features, Row>();
    return columns.map((column) =>
      helper.accessor((row: Row): unknown => column.sortBy?.(row), {
        id: column.id,
        header: column.header,
        enableSorting: column.sortBy !== undefined,
        sortUndefined: "last",
        sortFn: (a, b, id) => compare(a.getValue(id), b.getValue(id)),
      }),
    );
  }, [columns]);
  const data = useMemo(() => [...rows], [rows]);
  const table = useTable({
    features,
    columns: defs,
    data,
    getRowId: rowKey,
    enableSortingRemoval: false,
    state: { sorting },
    onSortingChange: (change) => {
      const [next] = typeof change === "function" ? change(sorting) : change;
      if (next !== undefined) order(next);
    },
  });
  const byId = new Map(columns.map((column) => [column.id, column]));
  const current = sorting[0];

  return (
    <div>
      <PhoneSort columns={columns} sorting={current} onChange={order} />
      <table role="table" className="block w-full border-collapse md:table">
        <caption className="sr-only">{caption}</caption>
        <thead role="rowgroup" className="hidden md:table-header-group">
          {table.getHeaderGroups().map((group) => (
            <tr role="row" key={group.id}>
              {group.headers.map((header) => {
                const column = byId.get(header.column.id);
                const sorted = header.column.getIsSorted();
                return (
                  <th
                    role="columnheader"
                    scope="col"
                    key={header.id}
                    aria-sort={sorted === false ? undefined : sorted === "asc" ? "ascending" : "descending"}
                    className={classNames(
                      "sticky top-0 z-10 whitespace-nowrap border-b border-line bg-bg py-2 pr-4 text-sm font-[500] text-muted first:pl-2 last:pr-0",
                      column?.align === "end" ? "text-right" : "text-left",
                    )}
                  >
                    {header.column.getCanSort() ? (
                      <button
                        type="button"
                        onClick={header.column.getToggleSortingHandler()}
                        className="inline-flex min-h-6 items-center gap-1 hover:text-text"
                      >
                        {column?.header}
                        {sorted === "asc" ? <ArrowUp aria-hidden size={13} /> : null}
                        {sorted === "desc" ? <ArrowDown aria-hidden size={13} /> : null}
                      </button>
                    ) : column?.hideHeader === true ? (
                      <span className="sr-only">{column.header}</span>
                    ) : (
                      column?.header
                    )}
                  </th>
                );
              })}
            </tr>
          ))}
        </thead>
        <tbody role="rowgroup" className="block md:table-row-group">
          {table.getRowModel().rows.map((row) => (
            <tr
              role="row"
              key={row.id}
              onClick={onRow === undefined ? undefined : () => onRow(row.original)}
              className={classNames(
                "block border-b border-line py-3 md:table-row",
                onRow !== undefined && "cursor-pointer",
                isMarked?.(row.original) === true && "bg-surface shadow-[inset_3px_0_0_var(--lamp)] max-md:pl-3",
              )}
            >
              {columns.map((column) => (
                <DataCell key={column.id} column={column} row={row.original} />
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function DataCell<Row>({ column, row }: { readonly column: DataColumn<Row>; readonly row: Row }) {
  const phone = column.phone ?? "plain";
  return (
    <td
      role="cell"
      className={classNames(
        "align-middle md:table-cell md:py-2 md:pr-4 md:first:pl-2 md:last:pr-0",
        phone === "hidden" && "hidden",
        phone === "head" && "block pb-1",
        phone === "bare" && "block py-0.5",
        phone === "plain" && "flex items-baseline gap-3 py-0.5",
        column.align === "end" && "md:text-right",
        column.className,
      )}
    >
      {phone === "plain" && column.hideHeader !== true ? (
        <span aria-hidden className="w-28 shrink-0 text-sm text-muted md:hidden">
          {column.header}
        </span>
      ) : null}
      {phone === "plain" ? <div className="min-w-0 md:contents">{column.cell(row)}</div> : column.cell(row)}
    </td>
  );
}

/** A phone shows no head, so the order is chosen from a list. */
function PhoneSort<Row>({
  columns,
  sorting,
  onChange,
}: {
  readonly columns: readonly DataColumn<Row>[];
  readonly sorting: Sorting | undefined;
  readonly onChange: (sorting: Sorting) => void;
}) {
  const sortable = columns.filter((column) => column.sortBy !== undefined);
  if (sortable.length < 2) return null;
  return (
    <label className="flex items-center gap-3 border-b border-line pb-2 text-sm text-muted md:hidden">
      In order of
      <select
        value={sorting === undefined ? "" : `${sorting.id} ${sorting.desc ? "down" : "up"}`}
        onChange={(event) => {
          const [id, direction] = event.target.value.split(" ");
          if (id !== undefined) onChange({ id, desc: direction === "down" });
        }}
        className="min-h-9 min-w-0 flex-1 rounded-control border border-edge bg-surface px-2 text-base text-text"
      >
        {sorting === undefined ? <option value="">as listed</option> : null}
        {sortable.flatMap((column) => [
          <option key={`${column.id} up`} value={`${column.id} up`}>
            {column.header}, ascending
          </option>,
          <option key={`${column.id} down`} value={`${column.id} down`}>
            {column.header}, descending
          </option>,
        ])}
      </select>
    </label>
  );
}
