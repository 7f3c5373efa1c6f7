"use client";

import { useRouter } from "next/navigation";
import { useMemo } from "react";
import { edidNotes, edidOfAddress } from "@/components/screens/edid-file";
import type { EdidView } from "@/components/screens/edid-file";
import { EdidPanel } from "@/components/screens/edid-panel";
import type { KnownMode } from "@/components/screens/known-modes";
import { ScreenDetail } from "@/components/screens/screen-detail";
import { sendable } from "@/components/screens/sendable";
import { EDID_GROUP } from "@/components/screens/use-device-modes";
import type { DeviceModes } from "@/components/screens/use-device-modes";
import { useAddScreen } from "@/components/screens/use-screens";
import { signInPath } from "@/components/shell/navigation";
import { useSignedIn } from "@/components/shell/signed-in";
import { Button, ButtonLink } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { ProblemMessage } from "@/components/ui/problem-message";
import { modeName } from "@/lib/timing/mode-name";

/** A screen to be, from the EDID that the address carries: what it takes, what the EDID left open, and how to keep it. */
export function EdidDetail({ address }: { readonly address: string }) {
  const read = useMemo(() => edidOfAddress(address), [address]);
  if (!read.ok) return <EmptyState title="This EDID cannot be read">{read.error}</EmptyState>;
  return <ReadEdid edid={read.value} />;
}

/** Timings that an EDID lists, each once, by lines, rate and width. */
function listedModes({ reading }: EdidView): readonly KnownMode[] {
  const named = reading.timings.map(({ timing }) => {
    const name = `${modeName(timing)}, ${timing.horizontal.active} px`;
    return [name, { id: `edid ${name}`, name, timing }] as const;
  });
  return [...new Map(named).values()];
}

function ReadEdid({ edid }: { readonly edid: EdidView }) {
  const user = useSignedIn();
  const router = useRouter();
  const add = useAddScreen();
  const listed: DeviceModes = {
    deviceId: EDID_GROUP,
    deviceName: "its EDID",
    state: "read",
    modes: listedModes(edid),
  };
  const form = `/screens/new?edid=${edid.address}`;
  const onAdd = () =>
    add.mutate(
      { envelope: sendable(edid.screen), notes: edidNotes(edid) },
      { onSuccess: (screen) => router.push(`/screens?show=${screen.id}`) },
    );
  return (
    <ScreenDetail
      envelope={edid.screen}
      devices={[listed]}
      above="From an EDID file, not kept yet"
      acts={
        user === null ? (
          <ButtonLink kind="primary" href={signInPath(`/screens?edid=${edid.address}`)}>
            Sign in to keep it
          </ButtonLink>
        ) : (
          <>
            <ButtonLink href={form}>Change it first</ButtonLink>
            <Button kind="primary" disabled={add.isPending} onClick={onAdd}>
              Add screen
            </Button>
          </>
        )
      }
      lead={
        <>
          {add.error === null ? null : <ProblemMessage error={add.error} />}
          <EdidPanel edid={edid} />
        </>
      }
    />
  );
}
