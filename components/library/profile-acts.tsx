"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import { useDeleteProfile, useSetVisibility } from "@/components/library/use-profiles";
import { Button } from "@/components/ui/button";
import { Confirm } from "@/components/ui/dialog";
import { Menu } from "@/components/ui/popover";
import type { MenuItem } from "@/components/ui/popover";
import { problemText } from "@/components/ui/problem-text";
import { useToast } from "@/components/ui/toast";
import type { ProfileDetail } from "@/lib/contracts/profile";

/** What can be done with a profile as a whole: export by everybody, share and delete by its owner. */
export function ProfileActs({ profile, revision }: { readonly profile: ProfileDetail; readonly revision: number }) {
  const [asking, setAsking] = useState(false);
  const router = useRouter();
  const toast = useToast();
  const setVisibility = useSetVisibility(profile.id);
  const remove = useDeleteProfile(profile.id);
  const say = (error: unknown) => toast({ text: problemText(error).fact });
  const isShared = profile.visibility === "shared";
  const change = () =>
    setVisibility.mutate(isShared ? "private" : "shared", {
      onSuccess: () =>
        toast({ text: isShared ? "Only you see this profile now." : "Everybody sees this profile now." }),
      onError: say,
    });
  const items: readonly MenuItem[] = [
    { kind: "act", label: isShared ? "Make private" : "Share", onAct: change, disabled: setVisibility.isPending },
    { kind: "rule" },
    { kind: "act", label: "Delete", tone: "halt", onAct: () => setAsking(true) },
  ];
  const onDelete = () =>
    remove.mutate(undefined, {
      onSuccess: () => {
        toast({ text: `${profile.title} was deleted.` });
        router.push("/library");
      },
      onError: say,
    });
  return (
    <>
      <a
        href={`/api/profiles/${profile.id}/export?revision=${revision}`}
        download
        className="inline-flex min-h-9 items-center rounded-control border border-edge bg-surface px-3.5 text-[14px] font-button hover:border-text"
      >
        Export .porch.json
      </a>
      {profile.mine ? <Menu trigger={<Button>More</Button>} items={items} /> : null}
      <Confirm
        open={asking}
        onOpenChange={setAsking}
        title={`Delete ${profile.title}?`}
        description="It leaves every list, with all its revisions. Devices that it was applied to keep what they have."
        act="Delete"
        actKind="halt"
        onAct={onDelete}
      />
    </>
  );
}
