"use client";

import { useState } from "react";
import { Editor } from "@/components/drivers/editor/editor";
import { stateWords } from "@/components/drivers/driver-words";
import { useVersion } from "@/components/drivers/use-drivers";
import { ButtonLink } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { DriverVersionDetail } from "@/lib/contracts/driver";

/** The editor of a draft, once it was loaded. What is typed stays, whatever the list of versions says later. */
export function EditorPage({ slug, version }: { readonly slug: string; readonly version: string }) {
  const detail = useVersion({ slug, version });
  const [begun, setBegun] = useState<DriverVersionDetail | null>(null);
  if (begun === null && detail.data !== undefined) setBegun(detail.data);
  const back = <ButtonLink href={`/drivers/${slug}?version=${version}`}>To the driver</ButtonLink>;
  if (begun === null) {
    return (
      <div className="gutter py-8">
        {detail.error === null ? <p className="text-muted">Loading</p> : <ProblemMessage error={detail.error} act={back} />}
      </div>
    );
  }
  if (begun.state === "published" || begun.state === "withdrawn") {
    return (
      <div className="gutter py-8">
        <EmptyState title={`Version ${version} is ${stateWords[begun.state]}`} act={back}>
          It never changes any more. Begin a new draft from it instead.
        </EmptyState>
      </div>
    );
  }
  return <Editor begun={begun} current={detail.data ?? begun} />;
}
