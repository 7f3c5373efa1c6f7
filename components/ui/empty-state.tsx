import type { ReactNode } from "react";

/** Nothing here yet, why, and what to do next. */
export function EmptyState({
  title,
  children,
  act,
}: {
  readonly title: string;
  readonly children: ReactNode;
  readonly act?: ReactNode;
}) {
  return (
    <div className="flex flex-col items-start gap-3 border border-dashed border-edge px-5 py-6">
      <h3 className="text-xl">{title}</h3>
      <div className="max-w-[60ch] text-muted">{children}</div>
      {act === undefined ? null : <div className="mt-1 flex flex-wrap gap-3">{act}</div>}
    </div>
  );
}
