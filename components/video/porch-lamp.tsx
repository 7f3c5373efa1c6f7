import type { LinkState } from "@/components/shell/link-state";

/** A video line with a lamp on its back porch: the state of the link. `text` says it in words. */
export function PorchLamp({ state, text }: { readonly state: LinkState; readonly text: string }) {
  return (
    <span className="inline-flex shrink-0" data-link-state={state}>
      <svg
        aria-hidden
        width={46}
        height={28}
        viewBox="0 0 46 28"
        className="fill-none"
        strokeWidth={2}
        strokeLinejoin="round"
      >
        {state === "lit" || state === "breathing" ? (
          <circle
            cx={21.5}
            cy={9.5}
            r={9}
            className={state === "breathing" ? "lamp-breathes fill-glow" : "fill-glow"}
            opacity={0.25}
          />
        ) : null}
        <path d="M1 16h7v9h8v-9h11V6h18" className="stroke-text" />
        <LampBulb state={state} />
      </svg>
      <span className="sr-only" role="status">
        {text}
      </span>
    </span>
  );
}

function LampBulb({ state }: { readonly state: LinkState }) {
  switch (state) {
    case "dark":
      return <circle cx={21.5} cy={9.5} r={4.4} className="fill-bg stroke-edge" />;
    case "lit":
      return <circle cx={21.5} cy={9.5} r={4.6} className="fill-glow" />;
    case "breathing":
      // The ring tells it from a lamp that is merely lit, also where nothing moves.
      return (
        <>
          <circle cx={21.5} cy={9.5} r={7.5} className="stroke-glow" strokeWidth={1} />
          <circle cx={21.5} cy={9.5} r={4.6} className="lamp-breathes fill-glow" />
        </>
      );
    case "trouble":
      return (
        <>
          <circle cx={21.5} cy={9.5} r={5} className="fill-bg stroke-halt" />
          <path d="M17 14l9-9" className="stroke-halt" strokeWidth={2.5} />
        </>
      );
  }
}
