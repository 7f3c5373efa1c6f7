import type { ReactNode } from "react";

export type PageHeadProps = {
  readonly title: ReactNode;
  /** One line above the title: where this belongs. */
  readonly above?: ReactNode;
  /** A sentence or two. */
  readonly lead?: ReactNode;
  /** Acts of the whole page, right of the title. */
  readonly acts?: ReactNode;
};

/** The head of a page under the header: title, what it is for, its acts. */
export function PageHead({ title, above, lead, acts }: PageHeadProps) {
  return (
    <div className="flex flex-wrap items-end justify-between gap-x-8 gap-y-4 pb-5 pt-6">
      <div className="min-w-0">
        {above === undefined ? null : <div className="mb-1.5 text-sm text-muted">{above}</div>}
        <h1 className="break-words text-3xl tracking-[-0.02em]">{title}</h1>
        {lead === undefined ? null : <div className="mt-2 max-w-[68ch] text-muted">{lead}</div>}
      </div>
      {acts === undefined ? null : <div className="flex flex-wrap gap-3">{acts}</div>}
    </div>
  );
}

/** Heading of a part of a page, with what stands right of it. */
export function PartHead({
  title,
  aside,
  id,
}: {
  readonly title: ReactNode;
  readonly aside?: ReactNode;
  readonly id?: string;
}) {
  return (
    <div className="mb-2 flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1">
      <h2 id={id} className="text-xl">
        {title}
      </h2>
      {aside === undefined ? null : <div className="text-sm text-muted">{aside}</div>}
    </div>
  );
}

/** Says that what is shown was made up for the demonstration. */
export function DemoNote({ children }: { readonly children?: ReactNode }) {
  return (
    <p className="border-l-3 border-signal pl-3 text-sm text-muted">
      {children ?? "Demo: the Saltmarsh Play Archive, its people, devices and figures are invented."}
    </p>
  );
}
