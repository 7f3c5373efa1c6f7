"use client";

import Link from "next/link";
import { BackupList } from "@/components/backups/backup-list";
import { rasterWords, standingOf } from "@/components/backups/backup-words";
import { DeviceHead } from "@/components/backups/device-head";
import { useDevices } from "@/components/backups/use-backups";
import { NoticeList } from "@/components/drivers/notice-list";
import { DemoNoteFor } from "@/components/shell/demo-people";
import { useSignedIn } from "@/components/shell/signed-in";
import { Button, ButtonLink } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";
import { EmptyState } from "@/components/ui/empty-state";
import { FindingWord } from "@/components/ui/finding-icon";
import { formatAgo } from "@/components/ui/moments";
import { PageHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { ModeMark } from "@/components/video/mode-glyph";
import type { DeviceView } from "@/lib/contracts/device";

/** Devices at a glance; the backups of the chosen one beside them. */
export function BackupsView({ shown, now }: { readonly shown: string | null; readonly now: string }) {
  const user = useSignedIn();
  const devices = useDevices();
  const rows = devices.data ?? [];
  const chosen = rows.find((device) => device.id === shown) ?? rows[0];
  return (
    <div className="gutter flex flex-1 flex-col">
      <PageHead
        title="Backups"
        lead="Every setting of a device, read at one time. One backup can be known good: the state to come back to."
        acts={
          <ButtonLink kind="primary" href="/bench">
            Back up a device
          </ButtonLink>
        }
      />
      {devices.error === null ? null : (
        <ProblemMessage error={devices.error} act={<Button onClick={() => void devices.refetch()}>Try again</Button>} />
      )}
      {devices.isPending ? <p className="text-muted">Loading</p> : null}
      {devices.isSuccess && chosen === undefined ? <NoDevices /> : null}
      {chosen === undefined ? null : (
        <div className="-mx-4 grid flex-1 grid-cols-1 border-t border-line md:-mx-7 lg:grid-cols-[340px_minmax(0,1fr)]">
          <nav aria-label="Devices" className="border-line px-4 py-4 max-lg:border-b md:px-7 lg:border-r">
            <ul>
              {rows.map((device) => (
                <DeviceLink key={device.id} device={device} isCurrent={device.id === chosen.id} now={new Date(now)} />
              ))}
            </ul>
            <DemoNoteFor ownerIds={[user?.id]} className="mt-5" />
          </nav>
          <div className="min-w-0 px-4 pb-10 pt-5 md:px-7">
            <NoticeList deviceId={chosen.id} className="mb-5" />
            <DeviceHead key={chosen.id} device={chosen} />
            <BackupList key={`backups of ${chosen.id}`} device={chosen} />
          </div>
        </div>
      )}
    </div>
  );
}

function NoDevices() {
  return (
    <EmptyState
      title="No device was backed up yet"
      act={
        <>
          <ButtonLink kind="primary" href="/bench">
            Connect a device
          </ButtonLink>
          <ButtonLink href="/bench?simulated=lanternfield-lf8">Try a simulated device</ButtonLink>
        </>
      }
    >
      Connect one on the Bench and press Back up: all slots and modes are read, and stand here from then on.
    </EmptyState>
  );
}

function DeviceLink({
  device,
  isCurrent,
  now,
}: {
  readonly device: DeviceView;
  readonly isCurrent: boolean;
  readonly now: Date;
}) {
  const standing = standingOf(device);
  const { lastBackup } = device;
  const raster = lastBackup?.rasterOut ?? null;
  return (
    <li>
      <Link
        href={`/backups?device=${device.id}`}
        scroll={false}
        aria-current={isCurrent ? "true" : undefined}
        className={classNames(
          "block border-b border-line px-3 py-2.5 hover:bg-surface",
          isCurrent && "bg-surface shadow-[inset_3px_0_0_var(--lamp)]",
        )}
      >
        <span className="flex items-baseline justify-between gap-3">
          <span className="font-strong">{device.name}</span>
          <span className="text-sm text-muted">
            {lastBackup === null ? "" : formatAgo(new Date(lastBackup.takenAt), now)}
          </span>
        </span>
        {raster === null ? (
          <span className="block text-sm text-muted">{lastBackup === null ? "" : "put nothing out"}</span>
        ) : (
          <span className="mt-0.5 block">
            <ModeMark timing={raster} />
            <span className="figure block text-muted">{rasterWords(raster)}</span>
          </span>
        )}
        <span className="mt-0.5 block text-sm">
          <FindingWord severity={standing.severity}>{standing.words}</FindingWord>
        </span>
        {device.openRun === null ? null : (
          <span className="block text-sm font-strong">A run is open: {device.openRun.state}</span>
        )}
      </Link>
    </li>
  );
}
