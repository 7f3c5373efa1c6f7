"use client";

import Link from "next/link";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { ComparisonPart } from "@/components/recordings/comparison-part";
import { LineTable } from "@/components/recordings/line-table";
import { beganWords } from "@/components/recordings/recording-table";
import { useDeleteRecording, useRecording, useRecordingLines } from "@/components/recordings/use-recordings";
import { DemoNoteFor } from "@/components/shell/demo-people";
import { Button, ButtonLink } from "@/components/ui/button";
import { Confirm } from "@/components/ui/dialog";
import { formatCount } from "@/components/ui/figures";
import { PageHead, PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { problemText } from "@/components/ui/problem-text";
import { useToast } from "@/components/ui/toast";
import type { RecordingView } from "@/lib/contracts/recording";

/** One recording: its lines, and where a driver version says something else. */
export function RecordingDetailView({ id, version }: { readonly id: string; readonly version: string | null }) {
  const recording = useRecording(id);
  const lines = useRecordingLines(id);
  const [marked, setMarked] = useState<readonly number[]>([]);
  const [sight, setSight] = useState<{ readonly line: number } | null>(null);
  if (recording.error !== null) {
    return (
      <div className="gutter py-8">
        <ProblemMessage error={recording.error} act={<ButtonLink href="/recordings">All recordings</ButtonLink>} />
      </div>
    );
  }
  if (recording.data === undefined) return <p className="gutter py-8 text-muted">Loading</p>;
  const { data } = recording;
  return (
    <div className="gutter flex flex-1 flex-col pb-8">
      <PageHead
        above={<Link href="/recordings" className="link">All recordings</Link>}
        title={data.name}
        lead={<Facts recording={data} />}
        acts={
          <>
            <a href={`/api/recordings/${id}/file`} download className="inline-flex min-h-9 items-center rounded-control border border-edge bg-surface px-3.5 text-[14px] font-button hover:border-text">
              Save the file
            </a>
            {data.mine ? <DeleteRecording recording={data} /> : null}
          </>
        }
      />
      <div className="grid flex-1 grid-cols-1 gap-x-10 gap-y-6 border-t border-line pt-4 xl:grid-cols-[minmax(0,1fr)_minmax(0,480px)]">
        <section className="flex min-w-0 flex-col">
          <PartHead title="Exchanges" aside={`${formatCount(data.lines, "line", "lines")}, ${formatCount(data.bytes, "byte", "bytes")}`} />
          {lines.error === null ? null : <ProblemMessage error={lines.error} />}
          {lines.data === undefined ? null : <LineTable recording={lines.data} marked={marked} sight={sight} />}
        </section>
        <section className="min-w-0">
          <PartHead title="Replay against a driver" />
          {lines.data === undefined ? null : (
            <ComparisonPart slug={data.driver.slug} first={version} recording={lines.data} onMarked={setMarked} onLine={(line) => setSight({ line })} />
          )}
          <DemoNoteFor ownerIds={[data.owner.id]} className="mt-6" />
        </section>
      </div>
    </div>
  );
}

function Facts({ recording }: { readonly recording: RecordingView }) {
  const { driver, owner, mine, struckOut, questions, device } = recording;
  return (
    <>
      Made with driver{" "}
      <Link href={`/drivers/${driver.slug}`} className="link">
        {driver.slug} {driver.version}
      </Link>
      {device === null ? "" : ` on ${device.name}`}; began {beganWords(recording)}; by {mine ? "you" : owner.name}; names and
      serial numbers {struckOut ? "struck out" : "as they were"}
      {questions > 0 ? "; attached to a question, so the maintainers see it" : ""}.
    </>
  );
}

function DeleteRecording({ recording }: { readonly recording: RecordingView }) {
  const [isAsking, setAsking] = useState(false);
  const router = useRouter();
  const toast = useToast();
  const remove = useDeleteRecording();
  const onDelete = () =>
    remove.mutate(recording, {
      onSuccess: () => {
        toast({ text: `${recording.name} was deleted.` });
        router.push("/recordings");
      },
      onError: (error) => toast({ text: problemText(error).fact }),
    });
  return (
    <>
      <Button kind="quiet" onClick={() => setAsking(true)}>Delete</Button>
      <Confirm
        open={isAsking}
        onOpenChange={setAsking}
        title={`Delete ${recording.name}?`}
        description="It leaves every list, and questions that it is attached to lose it."
        act="Delete"
        actKind="halt"
        onAct={onDelete}
      />
    </>
  );
}
