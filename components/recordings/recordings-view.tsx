"use client";

import { RecordingTable } from "@/components/recordings/recording-table";
import { UploadForm } from "@/components/recordings/upload-form";
import { useRecordings } from "@/components/recordings/use-recordings";
import { useDrivers } from "@/components/drivers/use-drivers";
import { useIsMaintainer } from "@/components/drivers/use-is-maintainer";
import { DemoNoteFor } from "@/components/shell/demo-people";
import { Button, ButtonLink } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { PageHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";

/** What devices said, as it was captured: one's own recordings, for maintainers also those of questions. */
export function RecordingsView() {
  const isMaintainer = useIsMaintainer();
  const recordings = useRecordings(null);
  const drivers = useDrivers().data?.pages.flatMap((page) => page.items) ?? [];
  const rows = recordings.data?.pages.flatMap((page) => page.items) ?? [];
  const modelName = (slug: string) => {
    const found = drivers.find((driver) => driver.slug === slug);
    return found === undefined ? slug : `${found.maker} ${found.model}`;
  };
  return (
    <div className="gutter flex flex-1 flex-col pb-10">
      <PageHead
        title="Recordings"
        lead={
          isMaintainer
            ? "What devices said, byte by byte. Yours, and those that owners attached to a question."
            : "What your devices said, byte by byte. Only you see them, until you attach one to a question for the maintainers."
        }
        acts={
          <>
            <ButtonLink href="/drivers">Drivers</ButtonLink>
            {isMaintainer ? <ButtonLink href="/recordings/listen">Listen to a device</ButtonLink> : null}
          </>
        }
      />
      <div className="grid flex-1 grid-cols-1 content-start gap-x-12 gap-y-6 border-t border-line pt-4 xl:grid-cols-[minmax(0,1fr)_minmax(0,380px)]">
        <div className="min-w-0">
          {recordings.error === null ? null : (
            <ProblemMessage error={recordings.error} act={<Button onClick={() => void recordings.refetch()}>Try again</Button>} />
          )}
          {recordings.isPending ? <p className="text-muted">Loading</p> : null}
          {rows.length > 0 ? <RecordingTable rows={rows} modelName={modelName} /> : null}
          {recordings.isSuccess && rows.length === 0 ? (
            <EmptyState title="No recording yet" act={<ButtonLink href="/bench">Open the Bench</ButtonLink>}>
              Connect a device on the Bench, open the wire log and press Save a recording; then upload the file here.
            </EmptyState>
          ) : null}
          {recordings.hasNextPage ? (
            <Button className="mt-4" disabled={recordings.isFetchingNextPage} onClick={() => void recordings.fetchNextPage()}>
              Show more
            </Button>
          ) : null}
          <DemoNoteFor ownerIds={rows.map(({ owner }) => owner.id)} className="mt-6" />
        </div>
        <UploadForm />
      </div>
    </div>
  );
}
