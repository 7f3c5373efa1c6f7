"use client";

import Link from "next/link";
import { useState } from "react";
import { Button, ButtonLink } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { formatCount, formatFigure } from "@/components/ui/figures";
import { useBench, useBenchAccount, useBenchActions, useSettled } from "@/components/bench/bench-provider";

/** Back up, name the device, go on to the library; with progress and time left while a backup is read. */
export function BackupBar() {
  const progress = useBench((state) => state.progress);
  const activity = useBench((state) => state.activity);
  const isTrying = useBench((state) => state.activity === "running");
  const { backUp, cancel } = useBenchActions();
  const isFree = useSettled();
  return (
    <section aria-label="Backup" className="mt-4 border-t border-line pt-4">
      <div className="flex flex-wrap items-center gap-3">
        <Button kind="primary" disabled={!isFree} onClick={() => void backUp()}>Back up</Button>
        <ButtonLink href="/library" aria-disabled={!isFree}>Apply a profile</ButtonLink>
        {isTrying ? <span className="text-sm text-muted">after the trial</span> : null}
      </div>
      <div aria-live="polite" className="mt-3 min-h-6">
        {progress === null ? <BackupWords /> : (
          <div>
            <label className="flex items-baseline justify-between gap-3">
              <span>{activity === "backing-up" ? "Backing up" : "Reading"}: {progress.done} of {progress.total} settings</span>
              <span className="figure text-muted">{formatFigure(progress.secondsLeft, "s", { decimals: 1 })} left</span>
            </label>
            <progress className="mt-1 block h-1.5 w-full accent-lamp" max={progress.total} value={progress.done} aria-label="Settings read" />
            <Button size="small" className="mt-2" onClick={cancel}>Cancel</Button>
          </div>
        )}
      </div>
      <DeviceName />
    </section>
  );
}

function BackupWords() {
  const backup = useBench((state) => state.backup);
  const account = useBenchAccount();
  if (!backup) return <p className="text-sm text-muted">Nothing is backed up yet. Nothing can be written before that.</p>;
  const changed = backup.changedCount === null ? "the first of this device" : backup.changedCount === 0 ? "nothing changed since the one before" : `${formatCount(backup.changedCount, "value", "values")} changed since the one before`;
  return (
    <p className="text-sm text-muted">
      Backed up, {changed}. {backup.id === null ? (account ? "" : "It stays in this page: sign in to store backups.") : <Link className="link" href="/backups">See the backups</Link>}
    </p>
  );
}

function DeviceName() {
  const stored = useBench((state) => state.device?.stored ?? null);
  const { nameDevice } = useBenchActions();
  const [name, setName] = useState<string | null>(null);
  if (!stored) return null;
  if (name === null) {
    return <p className="mt-2 text-sm text-muted">Known as <span className="text-text">{stored.name}</span>. <button type="button" className="link" onClick={() => setName(stored.name)}>Rename</button></p>;
  }
  const save = async () => { await nameDevice(name.trim()); setName(null); };
  return (
    <form className="mt-3 flex items-end gap-3" onSubmit={(event) => { event.preventDefault(); void save(); }}>
      <TextField label="Name of this device" value={name} maxLength={80} required onChange={(event) => setName(event.target.value)} fieldClassName="flex-1" />
      <Button type="submit" disabled={name.trim() === ""}>Save</Button>
    </form>
  );
}
