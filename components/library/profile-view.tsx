"use client";

import Link from "next/link";
import { useRouter } from "next/navigation";
import { ModeTable, SlotTable } from "@/components/library/document-view";
import { ProfileActs } from "@/components/library/profile-acts";
import { RevisionPart } from "@/components/library/revision-part";
import { ScreenCheck } from "@/components/library/screen-check";
import { chosenScreen, useScreenOptions } from "@/components/library/use-my-screen";
import { useProfile, useRevision } from "@/components/library/use-profiles";
import { bandsInShort } from "@/components/screens/limit-words";
import { ButtonLink } from "@/components/ui/button";
import { FootBar } from "@/components/ui/foot-bar";
import { formatDate } from "@/components/ui/moments";
import { DemoNoteFor } from "@/components/shell/demo-people";
import { PageHead, PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import type { ProfileDetail } from "@/lib/contracts/profile";
import type { ProfileDocument } from "@/lib/profile/document";

export type ProfileViewProps = {
  readonly id: string;
  readonly revision: number | null;
  readonly screen: string | null;
};

/** A profile: what it holds, how it stands to a screen, its revisions, and the way to apply it. */
export function ProfileView({ id, revision, screen }: ProfileViewProps) {
  const router = useRouter();
  const profile = useProfile(id);
  const older = useRevision(id, revision);
  const options = useScreenOptions();
  const chosen = chosenScreen(options, screen);
  const problem = profile.error ?? older.error;
  if (problem !== null) {
    return (
      <div className="gutter py-8">
        <ProblemMessage error={problem} act={<ButtonLink href="/library">Look through the library</ButtonLink>} />
      </div>
    );
  }
  const shown = revision === null ? profile.data?.revision : older.data;
  if (profile.data === undefined || shown === undefined) return <p className="gutter py-8 text-muted">Loading</p>;
  const { document, number } = shown;
  const goScreen = (value: string) =>
    router.replace(
      `/library/${id}?${new URLSearchParams({ screen: value, ...(revision === null ? {} : { revision: String(revision) }) })}`,
      { scroll: false },
    );
  return (
    <>
      <div className="gutter">
        <PageHead
          above={<ProfileLine profile={profile.data} number={number} />}
          title={document.title ?? profile.data.title}
          lead={document.summary}
          acts={<ProfileActs profile={profile.data} revision={number} />}
        />
      </div>
      <div className="gutter grid flex-1 grid-cols-1 gap-x-10 border-t border-line lg:grid-cols-[minmax(0,1fr)_minmax(300px,380px)]">
        <div className="min-w-0 space-y-8 py-5">
          <section>
            <PartHead title="Slots" aside={<MadeFor document={document} />} />
            <SlotTable document={document} />
          </section>
          <section>
            <PartHead title="Modes" />
            <ModeTable document={document} />
          </section>
          {document.notes === undefined || document.notes === "" ? null : (
            <section>
              <PartHead title="Notes" />
              <p className="max-w-[70ch] whitespace-pre-wrap">{document.notes}</p>
            </section>
          )}
          <DemoNoteFor ownerIds={[profile.data.owner.id]} />
          <RevisionPart profileId={id} current={profile.data.currentRevision} shown={number} />
        </div>
        <aside aria-label="On a screen" className="min-w-0 border-line py-5 max-lg:border-t lg:border-l lg:pl-7">
          <ScreenCheck document={document} options={options} chosen={chosen} onChoose={goScreen} />
        </aside>
      </div>
      <FootBar
        status={
          <span className="text-muted">
            The device is backed up first, and nothing reaches its non-volatile memory until you keep it.
          </span>
        }
      >
        <ButtonLink kind="primary" href={`/bench?apply=${id}&revision=${number}`}>
          Apply
        </ButtonLink>
      </FootBar>
    </>
  );
}

function ProfileLine({ profile, number }: { readonly profile: ProfileDetail; readonly number: number }) {
  const isOld = number !== profile.currentRevision;
  return (
    <>
      By {profile.owner.name}, revision {number}
      {isOld ? ` of ${profile.currentRevision}` : ""}, changed {formatDate(new Date(profile.revision.createdAt))}
      {profile.visibility === "private" ? ", private" : ""}
      {isOld ? (
        <>
          {". "}
          <Link href={`/library/${profile.id}`} className="link">
            Show the current one
          </Link>
        </>
      ) : null}
    </>
  );
}

function MadeFor({ document }: { readonly document: ProfileDocument }) {
  const { screen, driver } = document.madeFor ?? {};
  const parts = [
    ...(driver === undefined
      ? []
      : [`taken from ${driver.slug}${driver.firmware === undefined ? "" : `, firmware ${driver.firmware}`}`]),
    ...(screen === undefined ? [] : [`made for ${screen.name}, ${bandsInShort(screen)}`]),
  ];
  return parts.length === 0 ? null : <>{parts.join("; ")}</>;
}
