"use client";

import Link from "next/link";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { EdidDetail } from "@/components/screens/edid-detail";
import { EdidDrop } from "@/components/screens/edid-drop";
import { ScreenDetail } from "@/components/screens/screen-detail";
import { bandsInShort } from "@/components/screens/limit-words";
import { useDeviceModes } from "@/components/screens/use-device-modes";
import { useDeleteScreen, useScreens } from "@/components/screens/use-screens";
import { DemoNoteFor } from "@/components/shell/demo-people";
import { signInPath } from "@/components/shell/navigation";
import { useSignedIn } from "@/components/shell/signed-in";
import { Button, ButtonLink } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";
import { Confirm } from "@/components/ui/dialog";
import { PageHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { ScreenView } from "@/lib/contracts/screen";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { screenPresets } from "@/lib/timing/screen-presets";
import type { ScreenPreset } from "@/lib/timing/screen-presets";

export type ScreensViewProps = {
  /** Id of a screen or of a standard envelope. */
  readonly shown: string | null;
  /** An EDID that was dropped here, as the address carries it. */
  readonly edid: string | null;
};

/** Screens of the owner and standard envelopes in a list, the chosen one whole beside it. */
export function ScreensView({ shown, edid }: ScreensViewProps) {
  const user = useSignedIn();
  const router = useRouter();
  const screens = useScreens();
  const mine = screens.data ?? [];
  const isWaiting = user !== null && screens.isPending;
  const chosen = edid === null ? mine.find((screen) => screen.id === shown) : undefined;
  const preset =
    edid !== null
      ? undefined
      : (screenPresets.find((each) => each.id === shown) ??
        (shown === null && mine.length === 0 && !isWaiting ? screenPresets[0] : undefined));
  const first = chosen ?? (preset === undefined && edid === null ? mine[0] : undefined);
  return (
    <div className="gutter flex flex-1 flex-col">
      <PageHead
        title="Screens"
        lead="What each CRT takes, and where that figure comes from. Every check before a write is made against one of these."
        acts={
          <>
            <ButtonLink href="/standards">Standards</ButtonLink>
            <ButtonLink href="/attenuator">Attenuator</ButtonLink>
            <ButtonLink kind="primary" href={user === null ? signInPath("/screens/new") : "/screens/new"}>
              Add a screen
            </ButtonLink>
          </>
        }
      />
      <div className="-mx-4 grid flex-1 grid-cols-1 border-t border-line md:-mx-7 lg:grid-cols-[340px_minmax(0,1fr)]">
        <div className="border-line px-4 py-4 max-lg:border-b md:px-7 lg:border-r">
          <OwnScreens screens={mine} current={first?.id} isWaiting={isWaiting} />
          {screens.error === null ? null : (
            <ProblemMessage
              error={screens.error}
              act={<Button onClick={() => void screens.refetch()}>Try again</Button>}
            />
          )}
          <EdidDrop
            className="mt-5"
            onEdid={({ address }) => router.push(`/screens?edid=${address}`, { scroll: false })}
          />
          <h2 className="mb-1 mt-6 text-lg">Standard envelopes</h2>
          <p className="mb-2 text-sm text-muted">To start from. The set’s service literature decides.</p>
          <ul>
            {screenPresets.map((each) => (
              <ScreenLink key={each.id} id={each.id} envelope={each.envelope} current={preset?.id === each.id} />
            ))}
          </ul>
          <DemoNoteFor ownerIds={[user?.id]} className="mt-6" />
          <p className="border-l-3 mt-6 border-edge pl-3 text-sm text-muted">
            Inside a CRT cabinet voltages stay lethal after switch-off. Service work belongs to a licensed technician;
            local codes come first.
          </p>
        </div>
        <div className="min-w-0 px-4 pb-10 pt-5 md:px-7">
          {edid !== null ? (
            <EdidDetail key={edid} address={edid} />
          ) : first !== undefined ? (
            <OwnScreenDetail key={first.id} screen={first} />
          ) : preset !== undefined ? (
            <PresetDetail preset={preset} />
          ) : null}
        </div>
      </div>
    </div>
  );
}

function OwnScreens({
  screens,
  current,
  isWaiting,
}: {
  readonly screens: readonly ScreenView[];
  readonly current: string | undefined;
  readonly isWaiting: boolean;
}) {
  const user = useSignedIn();
  return (
    <>
      <h2 className="mb-1 text-lg">Yours</h2>
      {screens.length > 0 ? (
        <ul>
          {screens.map((screen) => (
            <ScreenLink
              key={screen.id}
              id={screen.id}
              envelope={screen.envelope}
              current={screen.id === current}
              aside={screen.devices.map((device) => device.name).join(", ")}
            />
          ))}
        </ul>
      ) : (
        <p className="text-sm text-muted">
          {isWaiting
            ? "Loading"
            : user === null
              ? "Sign in to keep your own. The envelopes below can be looked at by everybody."
              : "None yet. Start from an envelope below, or add one by hand."}
        </p>
      )}
    </>
  );
}

function ScreenLink({
  id,
  envelope,
  current,
  aside,
}: {
  readonly id: string;
  readonly envelope: ScreenEnvelope;
  readonly current: boolean;
  readonly aside?: string;
}) {
  return (
    <li>
      <Link
        href={`/screens?show=${id}`}
        scroll={false}
        aria-current={current ? "true" : undefined}
        className={classNames(
          "block border-b border-line px-3 py-2 hover:bg-surface",
          current && "bg-surface shadow-[inset_3px_0_0_var(--lamp)]",
        )}
      >
        <span className="block font-strong">{envelope.name}</span>
        <span className="figure block text-muted">{bandsInShort(envelope)}</span>
        {aside === undefined || aside === "" ? null : (
          <span className="block text-sm text-muted">before it: {aside}</span>
        )}
      </Link>
    </li>
  );
}

function PresetDetail({ preset }: { readonly preset: ScreenPreset }) {
  const user = useSignedIn();
  const target = `/screens/new?from=${preset.id}`;
  const notes = Object.fromEntries(Object.entries(preset.basis).map(([limit, basis]) => [limit, basis.note]));
  return (
    <ScreenDetail
      envelope={preset.envelope}
      id={preset.id}
      above="Standard envelope"
      notes={notes}
      acts={<ButtonLink href={user === null ? signInPath(target) : target}>Start from this</ButtonLink>}
    />
  );
}

function OwnScreenDetail({ screen }: { readonly screen: ScreenView }) {
  const [asking, setAsking] = useState(false);
  const router = useRouter();
  const toast = useToast();
  const remove = useDeleteScreen();
  const devices = useDeviceModes(screen.devices);
  // This part leaves with the screen, and callbacks of `mutate` with it; a promise stays. A refusal shows below.
  const onDelete = () =>
    void remove.mutateAsync(screen).then(
      () => {
        toast({ text: `${screen.name} was deleted.` });
        router.replace("/screens");
      },
      () => undefined,
    );
  return (
    <ScreenDetail
      envelope={screen.envelope}
      id={screen.id}
      devices={devices}
      above={
        screen.devices.length === 0
          ? "No device stands before it"
          : `Before it: ${screen.devices.map((device) => device.name).join(", ")}`
      }
      acts={
        <>
          <ButtonLink href={`/screens/${screen.id}/edit`}>Edit</ButtonLink>
          <ButtonLink href={`/library?screen=${screen.id}`}>Profiles that fit</ButtonLink>
          <Button kind="halt" onClick={() => setAsking(true)}>
            Delete
          </Button>
        </>
      }
      foot={
        <>
          {screen.notes === "" ? null : (
            <>
              <h3 className="mb-1 mt-6 text-lg">Notes</h3>
              <p className="max-w-[70ch] whitespace-pre-wrap">{screen.notes}</p>
            </>
          )}
          {remove.error === null ? null : <ProblemMessage error={remove.error} />}
          <Confirm
            open={asking}
            onOpenChange={setAsking}
            title={`Delete ${screen.name}?`}
            description="Its limits are gone then. Devices that stand before it have no screen, and nothing is written to a device without one."
            act="Delete"
            actKind="halt"
            onAct={onDelete}
          />
        </>
      }
    />
  );
}
