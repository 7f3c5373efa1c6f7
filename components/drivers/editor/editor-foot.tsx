"use client";

import { useRouter } from "next/navigation";
import type { Reading } from "@/components/drivers/editor/reading";
import type { Draft } from "@/components/drivers/editor/use-draft";
import { usePublishVersion, useRunConformance } from "@/components/drivers/use-drivers";
import { Button } from "@/components/ui/button";
import { FootBar } from "@/components/ui/foot-bar";
import { formatCount } from "@/components/ui/figures";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { DriverVersionDetail } from "@/lib/contracts/driver";

export type EditorFootProps = {
  readonly draft: Draft;
  readonly reading: Reading;
  /** The reading is of the text as it stands. */
  readonly isRead: boolean;
  readonly note: string;
  /** As the server has it now. */
  readonly current: DriverVersionDetail;
  readonly onReport: () => void;
};

/** Save, run the suite on what was saved, publish what came out green; and why something cannot go yet. */
export function EditorFoot({ draft, reading, isRead, note, current, onReport }: EditorFootProps) {
  const { base, isChanged, isSaving } = draft;
  const router = useRouter();
  const toast = useToast();
  const run = useRunConformance(base);
  const publish = usePublishVersion(base);
  const isBusy = isSaving || run.isPending || publish.isPending;
  const isGreen = !isChanged && current.state === "conformance" && current.report?.green === true;
  const { savable } = reading;
  const onRun = () =>
    run.mutate(undefined, {
      onSuccess: ({ green }) => {
        toast({ text: green ? "Every case passed: the report is green." : "The report is red; what failed is named." });
        onReport();
      },
    });
  const onPublish = () =>
    publish.mutate(current.revision, {
      onSuccess: () => {
        toast({ text: `Version ${base.version} is published. Owners of the model are told.` });
        router.push(`/drivers/${base.slug}?version=${base.version}`);
      },
    });
  const problem = draft.error ?? run.error ?? publish.error;
  return (
    <>
      {problem === null ? null : <div className="gutter pb-3"><ProblemMessage error={problem} /></div>}
      <FootBar status={run.isPending ? "The suite runs at the server; this takes some seconds." : statusWords(draft, reading)}>
        <Button
          kind={isChanged ? "primary" : "plain"}
          disabled={!isChanged || !isRead || savable === null || isBusy || draft.stale !== null}
          onClick={() => {
            if (savable !== null) draft.save(savable, note);
          }}
        >
          Save
        </Button>
        <Button kind={isChanged || isGreen ? "plain" : "primary"} disabled={isChanged || isBusy} onClick={onRun}>
          Run conformance
        </Button>
        <Button kind={isGreen ? "primary" : "plain"} disabled={!isGreen || isBusy} onClick={onPublish}>
          Publish
        </Button>
      </FootBar>
    </>
  );
}

function statusWords({ isChanged, isSaving, base }: Draft, { problems, savable }: Reading): string {
  if (isSaving) return "Saving";
  const complaints = problems.length === 0 ? "" : `${formatCount(problems.length, "complaint", "complaints")}. `;
  if (isChanged && savable === null) return `${complaints}It cannot be saved before it is JSON and names slug, version, maker and model.`;
  if (isChanged) return `${complaints}Not saved yet.`;
  if (base.state === "conformance") return "Green, and can be published.";
  return `${complaints}Saved. Publishing needs a green report of what is saved.`;
}
