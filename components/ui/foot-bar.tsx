import type { ReactNode } from "react";

export type FootBarProps = {
  /** Why it cannot go yet, or what is about to happen. */
  readonly status: ReactNode;
  /** What it costs: writes, bytes, seconds. */
  readonly cost?: ReactNode;
  /** Buttons, the one primary last. */
  readonly children: ReactNode;
};

/** The bar at the foot of a view whose act is big. It stays in sight while the view scrolls. */
export function FootBar({ status, cost, children }: FootBarProps) {
  return (
    <div
      role="region"
      aria-label="What to do next"
      className="gutter sticky bottom-0 z-20 mt-auto flex flex-wrap items-center gap-x-5 gap-y-2 border-t border-edge bg-surface py-3"
    >
      <div className="min-w-[min(100%,18rem)] flex-1" aria-live="polite">
        {status}
      </div>
      {cost === undefined ? null : <div className="figure text-muted">{cost}</div>}
      <div className="flex w-full flex-wrap gap-3 *:flex-1 sm:w-auto sm:*:flex-none">{children}</div>
    </div>
  );
}
