import { formatFigure, formatSpan } from "@/components/ui/figures";
import { FindingIcon, FindingWord } from "@/components/ui/finding-icon";
import { loadVpp } from "@/lib/timing/attenuator";
import type { AttenuatorAnswer } from "@/lib/timing/attenuator";
import type { Span } from "@/lib/timing/envelope";

/** What a part of the series may be off by. Source: IEC 60063, E24 is made for parts of 5 %. */
const PART_TOLERANCE = 0.05;

const volts = (value: number) => formatFigure(value, "V", { decimals: 3 });

/** The value of the series that comes nearest to the wanted level; undefined where no resistor is needed. */
export function nearestPart(answer: AttenuatorAnswer, targetVpp: number): AttenuatorAnswer["e24"][number] | undefined {
  return answer.e24.reduce<AttenuatorAnswer["e24"][number] | undefined>(
    (best, part) =>
      best === undefined || Math.abs(part.resultVpp - targetVpp) < Math.abs(best.resultVpp - targetVpp) ? part : best,
    undefined,
  );
}

export type AttenuatorResultProps = {
  readonly answer: AttenuatorAnswer;
  readonly loadOhm: number;
  readonly targetVpp: number;
  /** What the screen takes, where it is known. */
  readonly takesVpp: Span | undefined;
};

/** The resistor, or that none is needed, or that none can help. */
export function AttenuatorResult(props: AttenuatorResultProps) {
  const { answer, targetVpp } = props;
  return (
    <div>
      <p className="flex items-start gap-2.5">
        <FindingIcon
          severity={answer.outcome === "direct" ? "fits" : answer.outcome === "too-weak" ? "stop" : "caution"}
          className="mt-1"
        />
        <span>
          <strong className="block text-xl">{headline(answer, targetVpp)}</strong>
          <span className="block text-muted">{answer.caution}</span>
        </span>
      </p>
      <dl className="figure mt-4 flex flex-wrap gap-x-8 gap-y-1">
        <Known name="source, open" value={volts(answer.sourceVpp)} />
        <Known name="its impedance" value={formatFigure(answer.sourceOhm, "Ω", { decimalsAtMost: 1 })} />
        {answer.outcome === "resistor" ? (
          <Known name="exact resistor" value={formatFigure(answer.seriesOhm, "Ω", { decimalsAtMost: 1 })} />
        ) : null}
      </dl>
      {answer.e24.length === 0 ? null : <PartTable {...props} />}
    </div>
  );
}

function headline(answer: AttenuatorAnswer, targetVpp: number): string {
  if (answer.outcome === "direct") return "No resistor is needed.";
  if (answer.outcome === "too-weak") return "Too weak: only an amplifier helps.";
  const part = nearestPart(answer, targetVpp);
  return part === undefined
    ? "No resistor of the series comes near."
    : `${formatFigure(part.ohm, "Ω", { decimalsAtMost: 1 })} in line with the sync.`;
}

function Known({ name, value }: { readonly name: string; readonly value: string }) {
  return (
    <div className="flex gap-2">
      <dt className="text-muted">{name}</dt>
      <dd>{value}</dd>
    </div>
  );
}

function PartTable({ answer, loadOhm, targetVpp, takesVpp }: AttenuatorResultProps) {
  const nearest = nearestPart(answer, targetVpp);
  const head = "py-1.5 pr-4 text-left text-sm font-[500] text-muted";
  return (
    <table className="mt-4 w-full border-collapse">
      <caption className="pb-1 text-left text-lg font-strong">Nearest E24 values</caption>
      <thead>
        <tr className="border-b border-line">
          <th scope="col" className={head}>
            Resistor
          </th>
          <th scope="col" className={head}>
            Gives
          </th>
          <th scope="col" className={`${head} max-sm:hidden`}>
            With a part 5 % off
          </th>
          <th scope="col" className={head}>
            {takesVpp === undefined ? "" : "On the screen"}
          </th>
        </tr>
      </thead>
      <tbody>
        {answer.e24.map(({ ohm, resultVpp }) => {
          const ends = [1 + PART_TOLERANCE, 1 - PART_TOLERANCE].map((share) =>
            loadVpp(answer.sourceVpp, answer.sourceOhm, ohm * share, loadOhm),
          );
          const [low = resultVpp, high = resultVpp] = ends;
          return (
            <tr key={ohm} className="border-b border-line">
              <th scope="row" className="figure whitespace-nowrap py-2 pr-4 text-left">
                {formatFigure(ohm, "Ω", { decimalsAtMost: 1 })}
                {ohm === nearest?.ohm && answer.e24.length > 1 ? (
                  <span className="ml-2 font-sans text-sm font-normal text-muted max-sm:ml-0 max-sm:block">
                    nearest
                  </span>
                ) : null}
              </th>
              <td className="figure whitespace-nowrap py-2 pr-4">{volts(resultVpp)}</td>
              <td className="figure whitespace-nowrap py-2 pr-4 text-muted max-sm:hidden">
                {formatSpan([low, high], "V", { decimals: 3 })}
              </td>
              <td className="py-2">
                {takesVpp === undefined ? null : <Taken low={low} high={high} span={takesVpp} />}
              </td>
            </tr>
          );
        })}
      </tbody>
    </table>
  );
}

function Taken({ low, high, span }: { readonly low: number; readonly high: number; readonly span: Span }) {
  if (low >= span[0] && high <= span[1]) return <FindingWord severity="fits">inside</FindingWord>;
  return <FindingWord severity="caution">{high > span[1] ? "too strong" : "too weak"}</FindingWord>;
}
