"use client";

import Link from "next/link";
import { causeWords, changedWords, rasterWords } from "@/components/backups/backup-words";
import { useBackup } from "@/components/backups/use-backups";
import { ModeTable, SlotTable, sourceWords } from "@/components/library/document-view";
import { ButtonLink } from "@/components/ui/button";
import { formatCount } from "@/components/ui/figures";
import { formatMoment } from "@/components/ui/moments";
import { PageHead, PartHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { LineWaveform } from "@/components/video/mode-waveform";
import type { BackupDetail } from "@/lib/contracts/backup";

/** Everything that one backup holds. */
export function BackupDetailView({ id }: { readonly id: string }) {
  const backup = useBackup(id);
  if (backup.error !== null) {
    return (
      <div className="gutter py-8">
        <ProblemMessage error={backup.error} act={<ButtonLink href="/backups">All backups</ButtonLink>} />
      </div>
    );
  }
  if (backup.data === undefined) return <p className="gutter py-8 text-muted">Loading</p>;
  const { data } = backup;
  const { content, rasterOut } = data;
  return (
    <div className="gutter flex-1 pb-12">
      <PageHead
        above={
          <Link href={`/backups?device=${data.deviceId}`} className="link">
            All backups of this device
          </Link>
        }
        title={data.name}
        lead={<Facts backup={data} />}
        acts={
          <>
            <ButtonLink href={`/library/publish?backup=${data.id}`}>Publish as a profile</ButtonLink>
            <ButtonLink kind="primary" href={`/bench?restore=${data.id}`}>
              Restore
            </ButtonLink>
          </>
        }
      />
      <div className="grid grid-cols-1 gap-x-12 gap-y-8 border-t border-line pt-5 xl:grid-cols-[minmax(0,1fr)_minmax(0,420px)]">
        <section className="min-w-0">
          <PartHead title="Slots" aside={`slot ${data.activeSlot} was active`} />
          <SlotTable document={content.document} activeSlot={data.activeSlot} />
        </section>
        <section className="min-w-0">
          <PartHead title="Put out" aside={rasterOut === null ? "" : rasterWords(rasterOut)} />
          {rasterOut === null ? (
            <p className="text-muted">Nothing was put out.</p>
          ) : (
            <LineWaveform timing={rasterOut} />
          )}
          <p className="mt-4 text-muted">
            {data.arriving === null ? "Nothing arrived." : `Arrived: ${sourceWords(data.arriving)}.`}
          </p>
          {content.unreadable.length === 0 ? null : (
            <p className="mt-2 text-muted">
              {formatCount(content.unreadable.length, "setting", "settings")} cannot be read on this device, so no
              restore changes them.
            </p>
          )}
        </section>
      </div>
      <section className="mt-8">
        <PartHead title="Modes" />
        <ModeTable document={content.document} />
      </section>
    </div>
  );
}

function Facts({ backup }: { readonly backup: BackupDetail }) {
  const values = Object.keys(backup.content.values).length;
  return (
    <>
      Taken {formatMoment(new Date(backup.takenAt))} {causeWords[backup.cause]}, firmware {backup.firmware};{" "}
      {formatCount(values, "value", "values")}, {changedWords(backup.changedValues)}
      {backup.changedValues === null ? " backup of this device" : " since the one before"}
      {backup.knownGood ? "; known good" : ""}.
    </>
  );
}
