import type { ReactNode } from "react";
import { FindingWord } from "@/components/ui/finding-icon";
import { fitOf } from "@/components/screens/fit-words";
import { limitOrder, limitValues, limitWords, sourceWords } from "@/components/screens/limit-words";
import { ModeMark } from "@/components/video/mode-glyph";
import { nearBands } from "@/components/video/plane-geometry";
import { RatePlane } from "@/components/video/rate-plane";
import type { RatePoint } from "@/components/video/rate-plane";
import type { EnvelopeLimit, ScreenEnvelope } from "@/lib/timing/envelope";
import { fieldRateHz, lineRateHz, linesPerField } from "@/lib/timing/rates";
import { standardNames, standardRaster } from "@/lib/timing/standards";

const standards = standardNames.map((name) => ({ name, timing: standardRaster(name).timing }));

/** Line counts whose rays help to read the plane: those of the standards. */
const rayLines = [...new Set(standards.map(({ timing }) => linesPerField(timing)))].filter((lines) =>
  Number.isInteger(lines),
);

function pointsFor(envelope: ScreenEnvelope): readonly RatePoint[] {
  return standards.map(({ name, timing }) => ({
    id: name,
    label: name,
    lineRateHz: lineRateHz(timing),
    fieldRateHz: fieldRateHz(timing),
    kind: fitOf(timing, envelope).fits ? "fits" : "outside",
  }));
}

/** Where the standard rasters fall in the bands of a screen. */
export function ScreenPlane({ envelope, heightPx }: { readonly envelope: ScreenEnvelope; readonly heightPx?: number }) {
  return (
    <RatePlane
      screenName={envelope.name}
      bands={envelope.bands}
      points={nearBands(pointsFor(envelope), envelope.bands)}
      rayLines={rayLines}
      heightPx={heightPx}
    />
  );
}

/** Each limit of a screen, with where it comes from. */
export function LimitTable({
  envelope,
  notes,
}: {
  readonly envelope: ScreenEnvelope;
  readonly notes?: Readonly<Partial<Record<EnvelopeLimit, string>>> | undefined;
}) {
  return (
    <table className="w-full border-collapse">
      <caption className="sr-only">Limits of {envelope.name}</caption>
      <thead>
        <tr className="border-b border-line text-left text-sm text-muted">
          <th scope="col" className="py-1.5 pr-4 font-[500]">
            Limit
          </th>
          <th scope="col" className="py-1.5 pr-4 font-[500]">
            Value
          </th>
          <th scope="col" className="py-1.5 font-[500]">
            From
          </th>
        </tr>
      </thead>
      <tbody>
        {limitOrder.map((limit) => (
          <LimitRow key={limit} envelope={envelope} limit={limit} note={notes?.[limit]} />
        ))}
      </tbody>
    </table>
  );
}

function LimitRow({
  envelope,
  limit,
  note,
}: {
  readonly envelope: ScreenEnvelope;
  readonly limit: EnvelopeLimit;
  readonly note: string | undefined;
}) {
  const values = limitValues(envelope, limit);
  const source = envelope.sources?.[limit];
  return (
    <tr className="border-b border-line align-top">
      <th scope="row" className="py-2 pr-4 text-left font-[500]">
        {limitWords[limit]}
      </th>
      <td className="py-2 pr-4">
        {values.length === 0 ? (
          <span className="text-muted">not known, so not checked</span>
        ) : (
          values.map((value) => (
            <span key={value} className="figure block">
              {value}
            </span>
          ))
        )}
        {note === undefined ? null : <span className="mt-0.5 block text-sm text-muted">{note}</span>}
      </td>
      <td className="py-2">
        {values.length === 0 ? (
          ""
        ) : source === undefined ? (
          <span className="text-muted">not stated</span>
        ) : (
          sourceWords[source]
        )}
      </td>
    </tr>
  );
}

/** The standard rasters, and whether a screen takes each. */
export function StandardFits({ envelope }: { readonly envelope: ScreenEnvelope }) {
  return (
    <ul className="divide-y divide-line border-y border-line">
      {standards.map(({ name, timing }) => {
        const fit = fitOf(timing, envelope);
        return (
          <li key={name} className="grid grid-cols-1 items-center gap-x-4 gap-y-0.5 py-1.5 sm:grid-cols-[230px_1fr]">
            <ModeMark timing={timing} name={name} />
            <FindingWord severity={fit.fits ? "fits" : "stop"}>
              {fit.fits ? "fits" : <span className="font-normal text-muted">{fit.words.split("; ")[0]}</span>}
            </FindingWord>
          </li>
        );
      })}
    </ul>
  );
}

/** A screen whole: name and acts, plane, standards, limits. */
export function ScreenDetail({
  envelope,
  above,
  acts,
  notes,
  foot,
}: {
  readonly envelope: ScreenEnvelope;
  readonly above?: ReactNode;
  readonly acts?: ReactNode;
  readonly notes?: Readonly<Partial<Record<EnvelopeLimit, string>>> | undefined;
  readonly foot?: ReactNode;
}) {
  return (
    <article aria-label={envelope.name} className="min-w-0">
      <div className="mb-4 flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
        <div className="min-w-0">
          {above === undefined ? null : <p className="text-sm text-muted">{above}</p>}
          <h2 className="break-words text-2xl">{envelope.name}</h2>
        </div>
        {acts === undefined ? null : <div className="flex flex-wrap gap-2.5">{acts}</div>}
      </div>
      <div className="grid grid-cols-1 gap-x-10 gap-y-6 xl:grid-cols-[minmax(0,5fr)_minmax(0,6fr)]">
        <ScreenPlane envelope={envelope} heightPx={300} />
        <div>
          <h3 className="mb-2 text-lg">Standard modes on it</h3>
          <StandardFits envelope={envelope} />
        </div>
      </div>
      <h3 className="mb-1 mt-6 text-lg">Limits</h3>
      <LimitTable envelope={envelope} notes={notes} />
      {foot}
    </article>
  );
}
