"use client";

import { NewDraftButton } from "@/components/drivers/new-draft-button";
import { reportWords, stateWords } from "@/components/drivers/driver-words";
import { usePublishVersion, useRunConformance } from "@/components/drivers/use-drivers";
import { useIsMaintainer } from "@/components/drivers/use-is-maintainer";
import { WithdrawButton } from "@/components/drivers/withdraw-button";
import { Button, ButtonLink } from "@/components/ui/button";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatMoment } from "@/components/ui/moments";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { DriverVersionView } from "@/lib/contracts/driver";

export type VersionHeadProps = {
  readonly version: DriverVersionView;
  readonly rows: readonly DriverVersionView[];
  /** A report was made: show it. */
  readonly onReport: () => void;
};

/** A version: how it stands, and what can be done with it. */
export function VersionHead({ version, rows, onReport }: VersionHeadProps) {
  const { severity, words } = reportWords(version.report);
  const by = version.author === null ? "" : ` by ${version.author.name}`;
  return (
    <div className="mb-4">
      <div className="flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
        <div className="min-w-0">
          <h2 className="text-2xl">
            Version {version.version}, {stateWords[version.state]}
          </h2>
          <p className="text-muted">
            {version.origin === "shipped" ? "Came with the program" : `Changed ${formatMoment(new Date(version.updatedAt))}${by}`}
            ; conformance <FindingWord severity={severity}>{words}</FindingWord>
            {version.report === null ? "" : ` on ${formatMoment(new Date(version.report.createdAt))}`}
          </p>
        </div>
        <div className="flex flex-wrap gap-2.5">
          <a
            href={`/api/drivers/${version.slug}/versions/${version.version}/export`}
            download
            className="inline-flex min-h-9 items-center rounded-control border border-edge bg-surface px-3.5 text-[14px] font-button hover:border-text"
          >
            Export .driver.json
          </a>
          <MaintainerActs version={version} rows={rows} onReport={onReport} />
        </div>
      </div>
      {version.note === "" || version.origin === "shipped" ? null : <p className="mt-2 max-w-[72ch] whitespace-pre-line">{version.note}</p>}
      {version.withdrawnReason === null ? null : (
        <p className="mt-2">
          <FindingWord severity="stop">Withdrawn: {version.withdrawnReason}</FindingWord>
        </p>
      )}
    </div>
  );
}

function MaintainerActs({ version, rows, onReport }: VersionHeadProps) {
  const isMaintainer = useIsMaintainer();
  const toast = useToast();
  const run = useRunConformance(version);
  const publish = usePublishVersion(version);
  if (!isMaintainer) return null;
  const isOpen = version.state === "draft" || version.state === "conformance";
  const isBusy = run.isPending || publish.isPending;
  const onRun = () =>
    run.mutate(undefined, {
      onSuccess: ({ green }) => {
        toast({ text: green ? "Every case passed: the report is green." : "The report is red; what failed is named." });
        onReport();
      },
    });
  const onPublish = () =>
    publish.mutate(version.revision, {
      onSuccess: () => toast({ text: `Version ${version.version} is published. Owners of the model are told.` }),
    });
  const problem = run.error ?? publish.error;
  return (
    <>
      {isOpen ? (
        <ButtonLink href={`/drivers/${version.slug}/versions/${version.version}`}>Edit</ButtonLink>
      ) : (
        <NewDraftButton version={version} rows={rows} />
      )}
      {version.state === "withdrawn" ? null : (
        <Button kind={version.state === "draft" ? "primary" : "plain"} disabled={isBusy} onClick={onRun}>
          {run.isPending ? "Running" : "Run conformance"}
        </Button>
      )}
      {version.state === "conformance" ? (
        <Button kind="primary" disabled={isBusy || version.report?.green !== true} onClick={onPublish}>
          Publish
        </Button>
      ) : null}
      {version.state === "published" ? <WithdrawButton version={version} /> : null}
      <span role="status" className="sr-only">{run.isPending ? "The suite runs at the server." : ""}</span>
      {problem === null ? null : <div className="w-full"><ProblemMessage error={problem} /></div>}
    </>
  );
}
