"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { PublishForm } from "@/components/library/publish-form";
import { usePublish } from "@/components/library/use-profiles";
import { useBackup, useBackups, useDevices } from "@/components/backups/use-backups";
import { ButtonLink } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { SelectField } from "@/components/ui/field";
import { formatMoment } from "@/components/ui/moments";
import { PageHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";

/** A backup becomes a profile: which one, which of its slots, and what to say about it. */
export function PublishView({ backupId }: { readonly backupId: string | null }) {
  const router = useRouter();
  const publish = usePublish();
  const devices = useDevices();
  const named = useBackup(backupId);
  const [deviceId, setDeviceId] = useState<string | null>(null);
  const device = deviceId ?? named.data?.deviceId ?? (backupId === null ? (devices.data?.[0]?.id ?? null) : null);
  const backups = useBackups(device);
  const rows = backups.data?.pages.flatMap((page) => page.items) ?? [];
  const [chosenId, setChosenId] = useState<string | null>(null);
  const wanted = chosenId ?? (deviceId === null ? backupId : null) ?? rows[0]?.id ?? null;
  const backup = useBackup(wanted);
  const problem = devices.error ?? named.error ?? backups.error ?? backup.error;
  return (
    <div className="flex flex-1 flex-col">
      <div className="gutter">
        <PageHead
          title="Publish a backup"
          lead="Some slots of a backup, with the modes that they use, as a neutral document that other makers’ devices can take too."
        />
      </div>
      {problem === null ? null : (
        <div className="gutter pb-4">
          <ProblemMessage error={problem} />
        </div>
      )}
      {devices.data?.length === 0 ? (
        <div className="gutter">
          <EmptyState
            title="There is no backup to publish"
            act={<ButtonLink href="/bench">Connect a device</ButtonLink>}
          >
            Back a device up on the Bench first; then its slots can be published from here.
          </EmptyState>
        </div>
      ) : (
        <div className="gutter border-t border-line py-4">
          <div className="grid max-w-4xl grid-cols-1 gap-4 sm:grid-cols-2">
            <SelectField
              label="Device"
              options={(devices.data ?? []).map((each) => ({ value: each.id, label: each.name }))}
              value={device ?? ""}
              onChange={(event) => {
                setDeviceId(event.target.value);
                setChosenId(null);
              }}
            />
            <SelectField
              label="Backup"
              options={rows.map((row) => ({
                value: row.id,
                label: `${row.name}, ${formatMoment(new Date(row.takenAt))}`,
              }))}
              value={wanted ?? ""}
              onChange={(event) => setChosenId(event.target.value)}
            />
          </div>
        </div>
      )}
      {backup.data === undefined ? null : (
        <PublishForm
          key={backup.data.id}
          backup={backup.data}
          isBusy={publish.isPending}
          error={publish.error}
          onPublish={(profile) => publish.mutate(profile, { onSuccess: (made) => router.push(`/library/${made.id}`) })}
        />
      )}
    </div>
  );
}
