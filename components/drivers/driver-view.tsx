"use client";

import Link from "next/link";
import { useState } from "react";
import { ConformancePart } from "@/components/drivers/conformance-part";
import { DifferencesPart } from "@/components/drivers/differences-part";
import { NoticeList } from "@/components/drivers/notice-list";
import { QuestionsPart } from "@/components/drivers/questions-part";
import { SaysPart } from "@/components/drivers/says-part";
import { VersionHead } from "@/components/drivers/version-head";
import { VersionLinks } from "@/components/drivers/version-links";
import { useDrivers, useVersion, useVersions } from "@/components/drivers/use-drivers";
import { RecordingsOfModel } from "@/components/recordings/recordings-of-model";
import { useSignedIn } from "@/components/shell/signed-in";
import { Button, ButtonLink } from "@/components/ui/button";
import { DemoNote, PageHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { TabPages } from "@/components/ui/segmented";
import type { DriverVersionView } from "@/lib/contracts/driver";

export type DriverViewProps = {
  readonly slug: string;
  /** The version that the address names. */
  readonly shown: string | null;
  /** The version that it is compared with. */
  readonly against: string | null;
  readonly part: string | null;
};

/** A device model's driver: its versions, and everything about the chosen one. */
export function DriverView({ slug, shown, against, part }: DriverViewProps) {
  const versions = useVersions(slug);
  const rows = versions.data?.pages.flatMap((page) => page.items) ?? [];
  const chosen =
    rows.find(({ version }) => version === shown) ?? rows.find(({ state }) => state === "published") ?? rows[0];
  const summary = useDrivers().data?.pages.flatMap((page) => page.items).find((one) => one.slug === slug);
  if (versions.error !== null) {
    return (
      <div className="gutter py-8">
        <ProblemMessage error={versions.error} act={<ButtonLink href="/drivers">All drivers</ButtonLink>} />
      </div>
    );
  }
  return (
    <div className="gutter flex flex-1 flex-col">
      <PageHead
        above={
          <Link href="/drivers" className="link">
            All drivers
          </Link>
        }
        title={summary === undefined ? slug : `${summary.maker} ${summary.model}`}
      />
      <NoticeList slug={slug} className="mb-4" />
      {versions.isPending ? <p className="text-muted">Loading</p> : null}
      {chosen === undefined ? null : (
        <div className="-mx-4 grid flex-1 grid-cols-1 border-t border-line md:-mx-7 lg:grid-cols-[300px_minmax(0,1fr)]">
          <nav aria-label="Versions" className="border-line px-4 py-4 max-lg:border-b md:px-7 lg:border-r">
            <VersionLinks rows={rows} chosen={chosen} />
            {versions.hasNextPage ? (
              <Button size="small" className="mt-3" disabled={versions.isFetchingNextPage} onClick={() => void versions.fetchNextPage()}>
                Show more
              </Button>
            ) : null}
            <div className="mt-5 max-lg:hidden">
              <DemoNote>Demo: this maker and this device are invented.</DemoNote>
            </div>
          </nav>
          <div className="min-w-0 px-4 pb-10 pt-5 md:px-7">
            <Version key={chosen.version} version={chosen} rows={rows} against={against} part={part} />
          </div>
        </div>
      )}
    </div>
  );
}

const PARTS = ["says", "conformance", "differences", "recordings", "questions"] as const;
type Part = (typeof PARTS)[number];

function Version({
  version,
  rows,
  against,
  part: wanted,
}: {
  readonly version: DriverVersionView;
  readonly rows: readonly DriverVersionView[];
  readonly against: string | null;
  readonly part: string | null;
}) {
  const user = useSignedIn();
  const [part, setPart] = useState<Part>(
    () => PARTS.find((one) => one === wanted) ?? (against === null ? "says" : "differences"),
  );
  const detail = useVersion(version);
  const { slug } = version;
  return (
    <>
      <VersionHead version={version} rows={rows} onReport={() => setPart("conformance")} />
      <TabPages
        label={`Version ${version.version}`}
        value={part}
        onChange={setPart}
        pages={[
          { value: "says", label: "What it says", content: <SaysPart detail={detail} /> },
          { value: "conformance", label: "Conformance", content: <ConformancePart reportId={version.report?.id ?? null} /> },
          { value: "differences", label: "Differences", content: <DifferencesPart version={version} rows={rows} against={against} /> },
          ...(user === null
            ? []
            : ([
                { value: "recordings", label: "Recordings", content: <RecordingsOfModel slug={slug} version={version.version} /> },
                { value: "questions", label: "Questions", content: <QuestionsPart slug={slug} /> },
              ] as const)),
        ]}
      />
    </>
  );
}
