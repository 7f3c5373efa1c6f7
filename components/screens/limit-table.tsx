import Link from "next/link";
import { limitOrder, limitValues, limitWords, sourceWords } from "@/components/screens/limit-words";
import type { EnvelopeLimit, ScreenEnvelope } from "@/lib/timing/envelope";

/** Each limit of a screen, with where it comes from. */
export function LimitTable({
  envelope,
  notes,
  id,
}: {
  readonly envelope: ScreenEnvelope;
  readonly id?: string | undefined;
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
          <LimitRow key={limit} envelope={envelope} limit={limit} note={notes?.[limit]} id={id} />
        ))}
      </tbody>
    </table>
  );
}

function LimitRow({
  envelope,
  limit,
  note,
  id,
}: {
  readonly envelope: ScreenEnvelope;
  readonly limit: EnvelopeLimit;
  readonly note: string | undefined;
  readonly id: string | undefined;
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
        {limit !== "syncVpp" || values.length === 0 || id === undefined ? null : (
          <Link href={`/attenuator?screen=${encodeURIComponent(id)}`} className="link text-sm">
            Work out a resistor for it
          </Link>
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
