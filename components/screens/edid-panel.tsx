import { productWords } from "@/components/screens/edid-file";
import type { EdidView } from "@/components/screens/edid-file";
import { CautionIcon, NoteIcon } from "@/components/ui/finding-icon";
import { formatCount, formatNumber } from "@/components/ui/figures";

/** What an EDID says of itself, and what in it is not as it should be. */
export function EdidPanel({ edid }: { readonly edid: EdidView }) {
  const { reading, notes, warnings } = edid;
  const { product, sizeCm, ranges } = reading;
  // Without range limits the envelope is a guess from a list: that has to be seen.
  const [first, ...rest] = notes;
  const cautions = [...(ranges === undefined && first !== undefined ? [first] : []), ...warnings];
  const plain = ranges === undefined ? rest : notes;
  return (
    <section aria-label="What the EDID says" className="mb-5">
      <dl className="flex flex-wrap gap-x-8 gap-y-1 border-y border-line py-2.5">
        <Fact name="Product" value={productWords(reading)} />
        {product.serial === undefined ? null : <Fact name="Serial" value={product.serial} />}
        {product.year === undefined ? null : <Fact name="Made" value={String(product.year)} />}
        <Fact
          name="Size"
          value={
            sizeCm === undefined ? "not stated" : `${formatNumber(sizeCm.width)} × ${formatNumber(sizeCm.height)} cm`
          }
        />
        <Fact name="Input" value={reading.input === "analog" ? "analogue" : "digital"} />
        <Fact name="EDID" value={reading.version} />
        <Fact name="Lists" value={formatCount(reading.timings.length, "timing", "timings")} />
      </dl>
      <ul className="mt-2 grid gap-y-1">
        {cautions.map((text) => (
          <li key={text} className="flex gap-2 font-strong">
            <CautionIcon className="mt-0.5" />
            <span>
              <span className="sr-only">Caution: </span>
              {text}
            </span>
          </li>
        ))}
        {plain.map((text) => (
          <li key={text} className="flex gap-2 text-muted">
            <NoteIcon className="mt-0.5" />
            <span>{text}</span>
          </li>
        ))}
      </ul>
    </section>
  );
}

function Fact({ name, value }: { readonly name: string; readonly value: string }) {
  return (
    <div className="flex items-baseline gap-2">
      <dt className="text-sm text-muted">{name}</dt>
      <dd className="figure">{value}</dd>
    </div>
  );
}
