"use client";

import { useRouter } from "next/navigation";
import { ScreenFormView } from "@/components/screens/screen-form-view";
import { useAddScreen, useChangeScreen, useScreen } from "@/components/screens/use-screens";
import { Button } from "@/components/ui/button";
import { ProblemMessage } from "@/components/ui/problem-message";
import { screenPresets } from "@/lib/timing/screen-presets";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

const blank: ScreenEnvelope = { name: "", bands: [{ lineRateHz: [15_577, 15_892], fieldRateHz: [58.44, 61.44] }] };

/** The contract's envelope is the same with lists that can be written to. */
function sendable(envelope: ScreenEnvelope) {
  const { sources, ...limits } = envelope;
  return {
    ...limits,
    bands: limits.bands.map(({ lineRateHz, fieldRateHz }) => ({
      lineRateHz: [lineRateHz[0], lineRateHz[1]] as [number, number],
      fieldRateHz: [fieldRateHz[0], fieldRateHz[1]] as [number, number],
    })),
    syncKinds: limits.syncKinds === undefined ? undefined : [...limits.syncKinds],
    syncVpp: limits.syncVpp === undefined ? undefined : ([limits.syncVpp[0], limits.syncVpp[1]] as [number, number]),
    sources: Object.fromEntries(
      Object.entries(sources ?? {}).flatMap(([limit, source]) => (source === undefined ? [] : [[limit, source]])),
    ),
  };
}

/** A screen by hand, or from an envelope. */
export function NewScreenView({ presetId }: { readonly presetId: string | null }) {
  const router = useRouter();
  const add = useAddScreen();
  const preset = screenPresets.find((each) => each.id === presetId);
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
