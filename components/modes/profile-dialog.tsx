"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { useAddRevision, useProfile, useProfiles, usePublish } from "@/components/library/use-profiles";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { SelectField, TextField } from "@/components/ui/field";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import { ModeMark } from "@/components/video/mode-glyph";
import { documentWithMode, withMode, type NamedMode } from "@/components/modes/store/mode-document";
import type { ProfileDetail } from "@/lib/contracts/profile";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming } from "@/lib/timing/raster";

const NEW = "new";
const ADD = "add";

type ProfileDialogProps = { readonly open: boolean; readonly onClose: () => void; readonly timing: RasterTiming };

/** The raster in hand goes into a new profile, or into a new revision of one of the owner's. */
export function ProfileDialog({ open, onClose, timing }: ProfileDialogProps) {
  const [profileId, setProfileId] = useState(NEW);
  const [name, setName] = useState(modeName(timing));
  const mine = useProfiles({ q: "", mine: true, fittingScreenId: null });
  const profiles = mine.data?.pages.flatMap(({ items }) => items) ?? [];
  const mode: NamedMode = { name: name.trim() === "" ? modeName(timing) : name.trim(), timing };
  return (
    <Dialog
      open={open}
      onOpenChange={(isOpen) => {
        if (!isOpen) onClose();
      }}
      title="Use in a profile"
      description="A profile holds modes in words that any maker’s device can take."
    >
      <div className="flex flex-col gap-4">
        <ModeMark timing={timing} />
        <TextField
          label="Name of the mode"
          maxLength={64}
          value={name}
          onChange={(event) => setName(event.target.value)}
        />
        <SelectField
          label="Profile"
          value={profileId}
          onChange={(event) => setProfileId(event.target.value)}
          options={[
            { value: NEW, label: "A new profile" },
            ...profiles.map(({ id, title }) => ({ value: id, label: title })),
          ]}
        />
        {mine.hasNextPage ? (
          <Button size="small" disabled={mine.isFetchingNextPage} onClick={() => void mine.fetchNextPage()}>
            Show more of your profiles
          </Button>
        ) : null}
        {mine.error === null ? null : <ProblemMessage error={mine.error} />}
        {profileId === NEW ? (
          <NewProfilePart mode={mode} />
        ) : (
          <RevisionPart key={profileId} profileId={profileId} mode={mode} />
        )}
      </div>
    </Dialog>
  );
}

/** Says that it is done, and goes there. */
function useArrival() {
  const router = useRouter();
  const toast = useToast();
  return (profile: ProfileDetail, text: string) => {
    toast({ text });
    router.push(`/library/${profile.id}`);
  };
}

function NewProfilePart({ mode }: { readonly mode: NamedMode }) {
  const [title, setTitle] = useState("");
  const publish = usePublish();
  const arrive = useArrival();
  const make = () =>
    publish.mutate(
      { document: documentWithMode(title.trim(), mode), visibility: "private" },
      { onSuccess: (made) => arrive(made, `${made.title} was made. Only you see it until you share it.`) },
    );
  return (
    <>
      <TextField
        label="Title"
        maxLength={120}
        placeholder="Modes for the wide CRT"
        value={title}
        onChange={(event) => setTitle(event.target.value)}
      />
      {publish.error === null ? null : <ProblemMessage error={publish.error} />}
      <Button kind="primary" disabled={title.trim() === "" || publish.isPending} onClick={make}>
        Make the profile
      </Button>
    </>
  );
}

const refusals = {
  full: "This profile has as many modes as a profile can have.",
  absent: "The mode to replace is not in this profile any more.",
} as const;

function RevisionPart({ profileId, mode }: { readonly profileId: string; readonly mode: NamedMode }) {
  const [place, setPlace] = useState(ADD);
  const [refusal, setRefusal] = useState<string | null>(null);
  const profile = useProfile(profileId);
  const add = useAddRevision(profileId);
  const arrive = useArrival();
  if (profile.data === undefined)
    return profile.error === null ? <p className="text-muted">Loading</p> : <ProblemMessage error={profile.error} />;
  const { revision, title } = profile.data;
  const modes = revision.document.modes ?? [];
  const replaced = modes.find(({ key }) => key === place);
  const make = () => {
    const made = withMode(revision.document, mode, place === ADD ? null : place);
    if (!made.ok) return setRefusal(refusals[made.error]);
    const note =
      replaced === undefined
        ? `Adds the mode ${mode.name}`
        : `Replaces the mode ${replaced.name ?? replaced.key} by ${mode.name}`;
    add.mutate(
      { document: made.value, note, after: revision.number },
      { onSuccess: (next) => arrive(next, `${title} has a new revision, ${next.currentRevision}.`) },
    );
  };
  return (
    <>
      <SelectField
        label="Where it goes"
        value={place}
        onChange={(event) => setPlace(event.target.value)}
        hint={
          replaced === undefined
            ? "Slots are pointed to it in a backup’s plan, or by a later revision."
            : "Every slot of this profile that uses the mode gets the new timing."
        }
        options={[
          { value: ADD, label: "A mode more" },
          ...modes.map(({ key, name }) => ({ value: key, label: `Instead of ${name ?? `mode ${key}`}` })),
        ]}
      />
      {refusal === null ? null : (
        <p role="alert" className="font-strong text-halt">
          {refusal}
        </p>
      )}
      {add.error === null ? null : <ProblemMessage error={add.error} />}
      <Button kind="primary" disabled={add.isPending} onClick={make}>
        Publish the revision
      </Button>
    </>
  );
}
