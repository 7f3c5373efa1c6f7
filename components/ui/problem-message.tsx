import type { ReactNode } from "react";
import { StopIcon } from "@/components/ui/finding-icon";
import { problemText } from "@/components/ui/problem-text";

/** A failed request, in words: fact, way out, the paths that were wrong, and an act where there is one. */
export function ProblemMessage({ error, act }: { readonly error: unknown; readonly act?: ReactNode }) {
  const { fact, detail, errors, requestId } = problemText(error);
  return (
    <div role="alert" className="border-l-3 flex items-start gap-3 border-halt bg-surface px-4 py-3">
      <StopIcon className="mt-0.5" />
      <div className="min-w-0 flex-1">
        <p className="font-strong text-halt">{fact}</p>
        {detail === undefined ? null : <p className="text-muted">{detail}</p>}
        {errors.length === 0 ? null : (
          <ul className="mt-2 max-h-56 overflow-y-auto">
            {errors.map((entry) => (
              <li key={`${entry.path} ${entry.message}`} className="flex flex-wrap gap-x-3 py-0.5">
                {entry.path === "" ? null : <code className="figure break-all">{entry.path}</code>}
                <span>{entry.message}</span>
              </li>
            ))}
          </ul>
        )}
        {requestId === undefined ? null : <p className="figure mt-2 text-muted">request {requestId}</p>}
        {act === undefined ? null : <div className="mt-3 flex flex-wrap gap-3">{act}</div>}
      </div>
    </div>
  );
}
