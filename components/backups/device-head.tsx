"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { deviceWords, rasterWords } from "@/components/backups/backup-words";
import { useChangeDevice, useDeleteDevice } from "@/components/backups/use-backups";
import { fitOf } from "@/components/screens/fit-words";
import { useScreens } from "@/components/screens/use-screens";
import { Button } from "@/components/ui/button";
import { Confirm, Dialog } from "@/components/ui/dialog";
import { SelectField, TextField } from "@/components/ui/field";
import { FindingWord } from "@/components/ui/finding-icon";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { DeviceView } from "@/lib/contracts/device";
import { modeName } from "@/lib/timing/mode-name";

/** A device: what it is, what it put out last, which screen stands before it. */
export function DeviceHead({ device }: { readonly device: DeviceView }) {
  const [editing, setEditing] = useState(false);
  return (
    <div className="mb-4 flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
      <div className="min-w-0 flex-1">
        <h2 className="break-words text-2xl">{device.name}</h2>
        <p className="text-muted">
          {deviceWords(device)}
          {device.serialNumber === null ? (
            ", told by its owner"
          ) : (
            <>
              , serial number <span className="figure">{device.serialNumber}</span>
            </>
          )}
        </p>
        <LastRaster device={device} />
      </div>
      <Button onClick={() => setEditing(true)}>Edit device</Button>
      {editing ? <EditDevice device={device} onClose={() => setEditing(false)} /> : null}
    </div>
  );
}

function LastRaster({ device }: { readonly device: DeviceView }) {
  const screens = useScreens();
  const raster = device.lastBackup?.rasterOut ?? null;
  const screen = screens.data?.find((each) => each.id === device.screen?.id);
  if (raster === null)
    return device.screen === null ? (
      <p className="text-muted">No screen is set.</p>
    ) : (
      <p className="text-muted">Before it: {device.screen.name}</p>
    );
  const fit = screen === undefined ? null : fitOf(raster, screen.envelope);
  return (
    <p className="mt-1">
      Last seen:{" "}
      <span className="figure">
        {modeName(raster)}, {rasterWords(raster)}
      </span>
      {device.screen === null ? <span className="text-muted">, no screen is set</span> : <> on {device.screen.name} </>}
      {fit === null ? null : (
        <FindingWord severity={fit.fits ? "fits" : "stop"}>
          {fit.fits ? "in range" : `out of range: ${fit.words.split("; ")[0]}`}
        </FindingWord>
      )}
    </p>
  );
}

function EditDevice({ device, onClose }: { readonly device: DeviceView; readonly onClose: () => void }) {
  const screens = useScreens();
  const change = useChangeDevice();
  const remove = useDeleteDevice();
  const toast = useToast();
  const router = useRouter();
  const [name, setName] = useState(device.name);
  const [screenId, setScreenId] = useState(device.screen?.id ?? "");
  const [asking, setAsking] = useState(false);
  const options = [
    { value: "", label: "No screen" },
    ...(screens.data ?? []).map((screen) => ({ value: screen.id, label: screen.name })),
  ];
  const save = () =>
    change.mutate(
      { device, change: { name: name.trim(), screenId: screenId === "" ? null : screenId } },
      {
        onSuccess: () => {
          toast({ text: `${name.trim()} was changed.` });
          onClose();
        },
      },
    );
  // This dialog leaves with the device, and callbacks of `mutate` with it; a promise stays. A refusal shows below.
  const onDelete = () =>
    void remove.mutateAsync(device).then(
      () => {
        toast({ text: `${device.name} was deleted.` });
        router.replace("/backups");
      },
      () => undefined,
    );
  return (
    <Dialog
      open
      onOpenChange={(open) => {
        if (!open) onClose();
      }}
      title="Edit device"
      foot={
        <>
          <Button kind="halt" onClick={() => setAsking(true)} className="mr-auto">
            Delete device
          </Button>
          <Button onClick={onClose}>Cancel</Button>
          <Button kind="primary" disabled={name.trim() === "" || change.isPending} onClick={save}>
            Save device
          </Button>
        </>
      }
    >
      <div className="flex flex-col gap-4">
        <TextField
          label="Name"
          maxLength={80}
          value={name}
          error={name.trim() === "" ? "Give the device a name." : undefined}
          onChange={(event) => setName(event.target.value)}
        />
        <SelectField
          label="Screen before it"
          hint="Every check uses what this screen takes."
          options={options}
          value={screenId}
          onChange={(event) => setScreenId(event.target.value)}
        />
        {change.error === null ? null : <ProblemMessage error={change.error} />}
        {remove.error === null ? null : <ProblemMessage error={remove.error} />}
      </div>
      <Confirm
        open={asking}
        onOpenChange={setAsking}
        title={`Delete ${device.name}?`}
        description="All its backups go with it. The device itself keeps what it holds."
        act="Delete device"
        actKind="halt"
        onAct={onDelete}
      />
    </Dialog>
  );
}
