"use client";

import { valueWords } from "@/components/drivers/driver-words";
import { useAnswerNotice, useMovePreview } from "@/components/drivers/use-notices";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { formatCount } from "@/components/ui/figures";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { DriverMovePreview, DriverNotice } from "@/lib/contracts/driver";

const kindWords: Readonly<Record<DriverMovePreview["settings"][number]["kind"], string>> = {
  added: "is read from now on",
  removed: "is no longer read",
  meaning: "means another value",
  range: "holds a value that is out of its new range",
  wire: "is asked or written in another way",
};

/** What a device's move to another version of its driver would change, and the move itself. */
export function MoveDialog({
  notice,
  to,
  onClose,
}: {
  readonly notice: DriverNotice;
  readonly to: string;
  readonly onClose: () => void;
}) {
  const { device, from } = notice;
  const preview = useMovePreview(device.id, to);
  const move = useAnswerNotice(device.id, "driver");
  const toast = useToast();
  const onMove = () =>
    move.mutate(to, {
      onSuccess: () => {
        toast({ text: `${device.name} is read with driver ${to} from now on.` });
        onClose();
      },
    });
  return (
    <Dialog
      open
      onOpenChange={(open) => {
        if (!open) onClose();
      }}
      title={`Move ${device.name} to driver ${to}?`}
      description={`It is read with ${from} now. Nothing is written to the device by a move; stored backups stay as they are.`}
      foot={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button kind="primary" disabled={!preview.isSuccess || move.isPending} onClick={onMove}>
            Move
          </Button>
        </>
      }
    >
      {preview.error === null ? null : <ProblemMessage error={preview.error} />}
      {move.error === null ? null : <ProblemMessage error={move.error} />}
      {preview.isPending ? <p className="text-muted">Reading the last backup with both versions</p> : null}
      {preview.data === undefined ? null : <Preview preview={preview.data} />}
    </Dialog>
  );
}

function Preview({ preview }: { readonly preview: DriverMovePreview }) {
  const { settings, changes, more, backupId } = preview;
  return (
    <>
      <h3 className="text-lg">What it reads differently</h3>
      <p className="text-muted">
        {backupId === null ? "There is no backup of this device, so only the settings themselves are compared." : "In the last backup of this device:"}
      </p>
      {settings.length === 0 ? (
        <p className="mt-1.5">Nothing: every value is read and means the same.</p>
      ) : (
        <ul className="mt-1.5 border-t border-line">
          {settings.map(({ key, label, kind, left, right }) => (
            <li key={`${key} ${kind}`} className="border-b border-line py-1.5">
              <span className="font-strong">{label}</span> {kindWords[kind]}
              <span className="figure block break-words text-muted">
                {key}: {valueWords(left)} → {valueWords(right)}
              </span>
            </li>
          ))}
        </ul>
      )}
      <details className="mt-3">
        <summary className="font-strong">
          {formatCount(changes.length, "difference", "differences")} in what the driver says{more ? ", and more" : ""}
        </summary>
        <ul className="mt-1">
          {changes.map(({ path, left, right }) => (
            <li key={path} className="border-t border-line py-1">
              <code className="figure break-all">{path}</code>
              <span className="figure block break-words text-muted">
                {valueWords(left)} → {valueWords(right)}
              </span>
            </li>
          ))}
        </ul>
      </details>
    </>
  );
}
