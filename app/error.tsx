"use client";

import { Button, ButtonLink } from "@/components/ui/button";

/** The page itself failed. The digest is the number under which the server logged it. */
export default function PageError({
  error,
  reset,
}: {
  readonly error: Error & { digest?: string };
  readonly reset: () => void;
}) {
  return (
    <main className="gutter flex flex-1 flex-col items-start justify-center gap-4 py-16 md:px-16">
      <h1 className="text-3xl">This page failed</h1>
      <p className="max-w-[60ch] text-muted">
        Try again; if it fails again, tell whoever runs this site the number below.
      </p>
      {error.digest === undefined ? null : <p className="figure text-muted">{error.digest}</p>}
      <div className="flex flex-wrap gap-3">
        <Button kind="primary" onClick={reset}>
          Try again
        </Button>
        <ButtonLink href="/">Front page</ButtonLink>
      </div>
    </main>
  );
}
