"use client";

import { useState } from "react";
import { useWithdrawVersion } from "@/components/drivers/use-drivers";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { TextAreaField } from "@/components/ui/field";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { DriverVersionView } from "@/lib/contracts/driver";

const MAX_REASON = 500;

/** Takes a published version back. The reason goes to the owners, so it has to be given. */
export function WithdrawButton({ version }: { readonly version: DriverVersionView }) {
  const [isOpen, setOpen] = useState(false);
  const [reason, setReason] = useState("");
  const withdraw = useWithdrawVersion(version);
  const toast = useToast();
  const onWithdraw = () =>
    withdraw.mutate(
      { revision: version.revision, reason: reason.trim().replace(/\s+/gu, " ") },
      {
        onSuccess: () => {
          setOpen(false);
          toast({ text: `Version ${version.version} was withdrawn. Owners who use it are told.` });
        },
      },
    );
  return (
    <>
      <Button kind="halt" onClick={() => setOpen(true)}>
        Withdraw
      </Button>
      <Dialog
        open={isOpen}
        onOpenChange={setOpen}
        title={`Withdraw version ${version.version}?`}
        description="Devices that use it go on with it until their owners move them. There is no way back: publish a new version instead."
        foot={
          <>
            <Button onClick={() => setOpen(false)}>Cancel</Button>
            <Button kind="halt" disabled={reason.trim() === "" || withdraw.isPending} onClick={onWithdraw}>
              Withdraw
            </Button>
          </>
        }
      >
        <TextAreaField
          label="Why"
          hint="Owners of the model read this."
          maxLength={MAX_REASON}
          value={reason}
          onChange={(event) => setReason(event.target.value)}
        />
        {withdraw.error === null ? null : <ProblemMessage error={withdraw.error} />}
      </Dialog>
    </>
  );
}
