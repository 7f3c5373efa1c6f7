import { differCount, figureRows } from "@/components/standards/figure-rows";
import type { FigureRow } from "@/components/standards/figure-rows";
import { classNames } from "@/components/ui/class-names";
import { ChangedRing } from "@/components/ui/finding-icon";
import type { NamedRaster } from "@/components/video/trace-pair";

const headLook = "py-1.5 pr-3 text-left text-sm font-[500] text-muted";

/** Every figure of two rasters; a ring marks those that differ. */
export function FigureTable({ left, right }: { readonly left: NamedRaster; readonly right: NamedRaster }) {
  const rows = figureRows(left.timing, right.timing);
  return (
    <>
      <p aria-live="polite" className="mb-1 text-sm text-muted">
        {differCount(rows)}
      </p>
      <table className="w-full border-collapse">
        <caption className="sr-only">
          Figures of {left.name} and {right.name}
        </caption>
        <thead>
          <tr className="border-b border-line align-bottom">
            <th scope="col" className={headLook}>
              Figure
            </th>
            <th scope="col" className={headLook}>
              {left.name}
            </th>
            <th scope="col" className={headLook}>
              {right.name}
            </th>
            <th scope="col" className={classNames(headLook, "max-sm:hidden")}>
              Right less left
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <FigureTableRow key={row.figure} row={row} />
          ))}
        </tbody>
      </table>
    </>
  );
}

function FigureTableRow({ row }: { readonly row: FigureRow }) {
  const tone = row.same ? "text-muted" : "text-text";
  return (
    <tr className="border-b border-line align-baseline">
      <th scope="row" className="py-1.5 pr-3 text-left font-[500]">
        <span className="inline-flex items-baseline gap-2">
          <span className="w-2.5 shrink-0">{row.same ? null : <ChangedRing />}</span>
          <span>
            {row.figure}
            {row.same ? null : <span className="sr-only">, differs</span>}
          </span>
        </span>
      </th>
      <td className={classNames("figure py-1.5 pr-3", tone)}>{row.left}</td>
      <td className={classNames("figure py-1.5 pr-3", tone)}>{row.right}</td>
      <td className="figure py-1.5 text-muted max-sm:hidden">{row.difference}</td>
    </tr>
  );
}
