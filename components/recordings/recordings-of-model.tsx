"use client";

import { RecordingTable } from "@/components/recordings/recording-table";
import { useRecordings } from "@/components/recordings/use-recordings";
import { Button, ButtonLink } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { ProblemMessage } from "@/components/ui/problem-message";

/** Recordings of one device model that the signed-in person may see; each opens compared with a version. */
export function RecordingsOfModel({ slug, version }: { readonly slug: string; readonly version: string }) {
  const recordings = useRecordings(slug);
  const rows = recordings.data?.pages.flatMap((page) => page.items) ?? [];
  if (recordings.error !== null) return <ProblemMessage error={recordings.error} />;
  if (recordings.isPending) return <p className="text-muted">Loading</p>;
  if (rows.length === 0) {
    return (
      <EmptyState title="No recording of this model" act={<ButtonLink href="/recordings">Upload a recording</ButtonLink>}>
        Save one from the wire log of the Bench, then upload it. Only a recording shows whether a driver is right about the
        hardware.
      </EmptyState>
    );
  }
  return (
    <>
      <p className="mb-3 text-muted">Open one to compare it with version {version}, byte by byte.</p>
      <RecordingTable rows={rows} version={version} />
      {recordings.hasNextPage ? (
        <Button size="small" className="mt-3" disabled={recordings.isFetchingNextPage} onClick={() => void recordings.fetchNextPage()}>
          Show more
        </Button>
      ) : null}
    </>
  );
}
