import type { ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

export type Station = {
  /** "In", "Device", "Out to Gallery 2, wide CRT". */
  readonly eyebrow: ReactNode;
  readonly title: ReactNode;
  /** Rates, firmware, age of the backup: short, in figures. */
  readonly figures: readonly string[];
};

export type SignalChainProps = {
  readonly input: Station;
  readonly device: Station;
  readonly output: Station;
  /** Whether something arrives and whether something leaves. */
  readonly flows: { readonly in: boolean; readonly out: boolean };
};

/** In → Device → Out to a screen. Heads the Bench. */
export function SignalChain({ input, device, output, flows }: SignalChainProps) {
  return (
    <ol className="gutter grid grid-cols-1 items-center gap-x-5 border-b border-line py-4 md:grid-cols-[auto_1fr_auto_1fr_auto]">
      <ChainStation station={input} />
      <ChainWire flows={flows.in} words={flows.in ? "signal arrives" : "nothing arrives"} />
      <ChainStation station={device} />
      <ChainWire flows={flows.out} words={flows.out ? "signal leaves" : "nothing leaves"} />
      <ChainStation station={output} />
    </ol>
  );
}

function ChainStation({ station }: { readonly station: Station }) {
  return (
    <li className="min-w-0">
      <div className="text-xs font-[500] text-muted">{station.eyebrow}</div>
      <div className="heading text-xl">{station.title}</div>
      <div className="figure flex flex-wrap gap-x-3 text-muted">
        {station.figures.map((figure) => (
          <span key={figure}>{figure}</span>
        ))}
      </div>
    </li>
  );
}

function ChainWire({ flows, words }: { readonly flows: boolean; readonly words: string }) {
  const line = flows ? "border-signal" : "border-dashed border-edge";
  return (
    <li className="relative my-1 ml-2 h-6 md:my-0 md:ml-0 md:h-3">
      <span className="sr-only">{words}</span>
      <span
        aria-hidden
        className={classNames(
          "absolute bottom-0 left-0 top-0 border-l-2 md:bottom-auto md:right-1 md:top-1/2 md:border-l-0 md:border-t-2",
          line,
        )}
      />
      <svg
        aria-hidden
        viewBox="0 0 10 10"
        className={classNames(
          "absolute -bottom-1 -left-[4px] size-2.5 rotate-90 md:bottom-auto md:left-auto md:right-0 md:top-1/2 md:-translate-y-[calc(50%-1px)] md:rotate-0",
          flows ? "fill-signal" : "fill-edge",
        )}
      >
        <path d="M0 0l10 5-10 5z" />
      </svg>
    </li>
  );
}
