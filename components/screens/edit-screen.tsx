"use client";

import { useRouter } from "next/navigation";
import { useMemo } from "react";
import { edidOfAddress } from "@/components/screens/edid-file";
import { ScreenFormView } from "@/components/screens/screen-form-view";
import { sendable } from "@/components/screens/sendable";
import { useAddScreen, useChangeScreen, useScreen } from "@/components/screens/use-screens";
import { Button } from "@/components/ui/button";
import { ProblemMessage } from "@/components/ui/problem-message";
import { screenPresets } from "@/lib/timing/screen-presets";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

const blank: ScreenEnvelope = { name: "", bands: [{ lineRateHz: [15_577, 15_892], fieldRateHz: [58.44, 61.44] }] };

export type NewScreenViewProps = {
  readonly presetId: string | null;
  /** An EDID to start from, as the address carries it. */
  readonly edid: string | null;
};

/** A screen by hand, from an envelope, or from an EDID. */
export function NewScreenView({ presetId, edid }: NewScreenViewProps) {
  const router = useRouter();
  const add = useAddScreen();
  const preset = screenPresets.find((each) => each.id === presetId);
  const read = useMemo(() => (edid === null ? null : edidOfAddress(edid)), [edid]);
  return (
    <ScreenFormView
      title="Add a screen"
      lead={
        preset === undefined
          ? "State what you know and where it comes from. What stays empty is not checked, and the checks say so."
          : `Started from ${preset.envelope.name}. Change what your set’s service literature says otherwise.`
      }
      envelope={preset?.envelope ?? blank}
      notes=""
      edid={read?.ok === true ? read.value : null}
      act="Add screen"
      isBusy={add.isPending}
      error={add.error}
      onSave={(envelope, notes) =>
        add.mutate(
          { envelope: sendable(envelope), notes, ...(preset === undefined ? {} : { presetId: preset.id }) },
          { onSuccess: (screen) => router.push(`/screens?show=${screen.id}`) },
        )
      }
    />
  );
}

/** One of the owner's screens, to change. */
export function EditScreenView({ id }: { readonly id: string }) {
  const router = useRouter();
  const screen = useScreen(id);
  const change = useChangeScreen(id);
  if (screen.error !== null) {
    return (
      <div className="gutter py-8">
        <ProblemMessage error={screen.error} act={<Button onClick={() => void screen.refetch()}>Try again</Button>} />
      </div>
    );
  }
  if (screen.data === undefined) return <p className="gutter py-8 text-muted">Loading</p>;
  const { envelope, notes, version, name } = screen.data;
  return (
    <ScreenFormView
      title={name}
      lead="What you change here counts from the next check on."
      envelope={envelope}
      notes={notes}
      act="Save screen"
      isBusy={change.isPending}
      error={change.error}
      onSave={(next, nextNotes) =>
        change.mutate(
          { change: { envelope: sendable(next), notes: nextNotes }, version },
          { onSuccess: () => router.push(`/screens?show=${id}`) },
        )
      }
    />
  );
}
