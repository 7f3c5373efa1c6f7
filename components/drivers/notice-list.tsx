"use client";

import Link from "next/link";
import { useState } from "react";
import { MoveDialog } from "@/components/drivers/move-dialog";
import { useAnswerNotice, useNotices } from "@/components/drivers/use-notices";
import { Button } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";
import { CautionIcon, ChangedRing } from "@/components/ui/finding-icon";
import { problemText } from "@/components/ui/problem-text";
import { useToast } from "@/components/ui/toast";
import type { DriverNotice } from "@/lib/contracts/driver";

export type NoticeListProps = {
  /** Only this device's, or every device of the signed-in owner. */
  readonly deviceId?: string;
  /** Only those of devices of one model. */
  readonly slug?: string;
  readonly className?: string;
  /** What else is to be known here of a move. */
  readonly hint?: string;
};

/** Tells an owner of new and of withdrawn driver versions, with the way on. Nothing stands here without any. */
export function NoticeList({ deviceId, slug, className, hint }: NoticeListProps) {
  const notices = useNotices();
  const shown = (notices.data ?? []).filter(
    (notice) =>
      (deviceId === undefined || notice.device.id === deviceId) && (slug === undefined || notice.slug === slug),
  );
  if (shown.length === 0) return null;
  return (
    <ul aria-label="Notices about drivers" className={classNames("border-t border-line", className)}>
      {shown.map((notice) => (
        <Notice key={notice.device.id} notice={notice} hint={hint} />
      ))}
    </ul>
  );
}

/** What happened to a device's driver, in a sentence. */
function noticeWords({ kind, from, to }: DriverNotice): string {
  if (kind === "new-version") return `Driver ${to ?? ""} is out; this device is read with ${from}.`;
  const next = to === null ? "There is no other version yet." : `Version ${to} is published.`;
  return `Driver ${from}, which this device is read with, was withdrawn. ${next}`;
}

function Notice({ notice, hint }: { readonly notice: DriverNotice; readonly hint: string | undefined }) {
  const [isMoving, setMoving] = useState(false);
  const toast = useToast();
  const { device, kind, slug, to, note } = notice;
  const putAside = useAnswerNotice(device.id, "driver-notice");
  return (
    <li className="flex flex-wrap items-center gap-x-4 gap-y-2 border-b border-line py-2.5">
      {kind === "withdrawn" ? <CautionIcon /> : <ChangedRing />}
      <p className="min-w-[min(100%,20rem)] flex-1">
        <span className="font-strong">{device.name}:</span> {noticeWords(notice)} {hint}
        {note === "" ? null : <span className="block text-sm text-muted">{note}</span>}
      </p>
      {to === null ? null : (
        <Button size="small" onClick={() => setMoving(true)}>
          See what it reads differently
        </Button>
      )}
      {kind === "new-version" && to !== null ? (
        <Button
          size="small"
          kind="quiet"
          disabled={putAside.isPending}
          onClick={() => putAside.mutate(to, { onError: (error) => toast({ text: problemText(error).fact }) })}
        >
          Not now
        </Button>
      ) : null}
      <Link href={`/drivers/${slug}`} className="link text-sm">
        Driver
      </Link>
      {isMoving && to !== null ? <MoveDialog notice={notice} to={to} onClose={() => setMoving(false)} /> : null}
    </li>
  );
}
