import type { ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

/** An octagon: this cannot be written. Always with a word beside it. */
export function StopIcon({ className }: { readonly className?: string }) {
  return (
    <svg aria-hidden viewBox="0 0 16 16" className={classNames("inline-block size-4 shrink-0 fill-halt", className)}>
      <path d="M5 .5h6L15.5 5v6L11 15.5H5L.5 11V5z" />
    </svg>
  );
}

/** A triangle: this must be acknowledged. */
export function CautionIcon({ className }: { readonly className?: string }) {
  return (
    <svg aria-hidden viewBox="0 0 16 16" className={classNames("inline-block size-4 shrink-0 fill-text", className)}>
      <path d="M8 1l7.5 14H.5z" />
    </svg>
  );
}

/** A ring: this differs. */
export function ChangedRing({ className }: { readonly className?: string }) {
  return (
    <svg aria-hidden viewBox="0 0 12 12" className={classNames("inline-block size-2.5 shrink-0", className)}>
      <circle cx="6" cy="6" r="4.5" className="fill-none stroke-signal" strokeWidth="2.5" />
    </svg>
  );
}

/** A small dot: good to know. */
export function NoteIcon({ className }: { readonly className?: string }) {
  return (
    <svg aria-hidden viewBox="0 0 16 16" className={classNames("inline-block size-4 shrink-0", className)}>
      <circle cx="8" cy="8" r="2.5" className="fill-muted" />
    </svg>
  );
}

/** A tick: this fits. */
export function FitsIcon({ className }: { readonly className?: string }) {
  return (
    <svg aria-hidden viewBox="0 0 16 16" className={classNames("inline-block size-4 shrink-0", className)}>
      <path d="M2.5 8.5l3.5 3.5 7.5-8" className="fill-none stroke-ok" strokeWidth="2" />
    </svg>
  );
}

export type FindingSeverity = "stop" | "caution" | "note" | "fits";

const icons: Readonly<Record<FindingSeverity, (props: { readonly className?: string }) => ReactNode>> = {
  stop: StopIcon,
  caution: CautionIcon,
  note: NoteIcon,
  fits: FitsIcon,
};

const tones: Readonly<Record<FindingSeverity, string>> = {
  stop: "font-strong text-halt",
  caution: "font-strong text-text",
  note: "text-text",
  fits: "text-ok",
};

/** Icon for the severity of a finding. */
export function FindingIcon({
  severity,
  className,
}: {
  readonly severity: FindingSeverity;
  readonly className?: string;
}) {
  const Icon = icons[severity];
  return <Icon className={className} />;
}

/** A word with the shape and colour of its severity: "fits your screen", "2 values to change". */
export function FindingWord({
  severity,
  children,
}: {
  readonly severity: FindingSeverity;
  readonly children: ReactNode;
}) {
  return (
    <span className={classNames("inline-flex items-baseline gap-1.5", tones[severity])}>
      <FindingIcon severity={severity} className="translate-y-[2px]" />
      <span>{children}</span>
    </span>
  );
}
