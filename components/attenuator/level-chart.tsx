import { nearestPart } from "@/components/attenuator/attenuator-result";
import { formatFigure } from "@/components/ui/figures";
import { attenuator } from "@/lib/timing/attenuator";

/** Levels and impedances that sync outputs are often said to have. Common practice, no source. */
const LEVELS_VPP = [1, 2, 3.3, 5];
const IMPEDANCES_OHM = [0, 33, 75];

const short = (value: number, unit: string) => formatFigure(value, unit, { decimalsAtMost: 2 });

function cellText(sourceVpp: number, sourceOhm: number, loadOhm: number, targetVpp: number): string {
  const read = attenuator({ sourceVpp, sourceOhm, loadOhm, targetVpp });
  if (!read.ok) return "";
  if (read.value.outcome === "direct") return "none";
  const part = nearestPart(read.value, targetVpp);
  return part === undefined ? "too weak" : short(part.ohm, "Ω");
}

export type LevelChartProps = { readonly loadOhm: number; readonly targetVpp: number };

/** The nearest resistor for levels that are often met: what to expect before anything was measured. */
export function LevelChart({ loadOhm, targetVpp }: LevelChartProps) {
  const head = "py-1.5 pr-4 text-left text-sm font-[500] text-muted";
  return (
    <table className="mt-6 w-full border-collapse border-t border-line">
      <caption className="pb-1 text-left">
        <span className="text-lg font-strong">What to expect</span>{" "}
        <span className="text-sm text-muted">
          for {short(targetVpp, "V")} into {short(loadOhm, "Ω")}; a reading decides
        </span>
      </caption>
      <thead>
        <tr className="border-b border-line">
          <th scope="col" className={head}>
            Level, open
          </th>
          {IMPEDANCES_OHM.map((ohm) => (
            <th key={ohm} scope="col" className={head}>
              from {short(ohm, "Ω")}
            </th>
          ))}
        </tr>
      </thead>
      <tbody>
        {LEVELS_VPP.map((vpp) => (
          <tr key={vpp} className="border-b border-line">
            <th scope="row" className="figure py-1.5 pr-4 text-left">
              {short(vpp, "V")}
            </th>
            {IMPEDANCES_OHM.map((ohm) => (
              <td key={ohm} className="figure whitespace-nowrap py-1.5 pr-4 text-muted">
                {cellText(vpp, ohm, loadOhm, targetVpp)}
              </td>
            ))}
          </tr>
        ))}
      </tbody>
    </table>
  );
}
