"use client";

import { usePathname } from "next/navigation";
import { useState } from "react";
import { Button, ButtonLink } from "@/components/ui/button";
import { FindingIcon } from "@/components/ui/finding-icon";
import { FootBar } from "@/components/ui/foot-bar";
import { signInPath } from "@/components/shell/navigation";
import { useSignedIn } from "@/components/shell/signed-in";
import { useModes } from "@/components/modes/modes-context";
import { ProfileDialog } from "@/components/modes/profile-dialog";
import { toQuery } from "@/components/modes/store/link";
import { useCopy } from "@/components/ui/use-copy";
import { rasterWords, verdictOf } from "@/components/modes/words";
import { formatModeline } from "@/lib/timing/modeline/format-modeline";
import { rasterToText } from "@/lib/timing/raster-text";

/** What the raster in hand is worth on this screen, and what can be done with it. */
export function ModesFoot() {
  const [open, setOpen] = useState(false);
  const copy = useCopy();
  const answer = useModes((state) => state.answer);
  const screen = useModes((state) => state.choices.screen);
  const query = useModes((state) => toQuery(state.choices));
  const user = useSignedIn();
  const pathname = usePathname();
  const hand = answer?.hand ?? null;
  const verdict = answer === null || screen.envelope === null ? null : verdictOf(answer, screen.envelope);
  const timing = hand?.timing ?? null;
  const isOut = verdict?.isInside === false;
  const bench =
    timing === null ? "" : `/bench?${new URLSearchParams({ mode: rasterToText(timing), screen: screen.id })}`;
  return (
    <>
      <FootBar
        status={
          timing === null || verdict === null ? (
            <span className="text-muted">No raster is in hand.</span>
          ) : (
            <span className="inline-flex gap-2">
              <FindingIcon severity={isOut ? "stop" : "fits"} className="mt-[3px]" />
              <span>
                <span className="font-strong">{rasterWords(timing)}</span>{" "}
                <span className={isOut ? "text-halt" : "text-muted"}>{verdict.words}</span>
              </span>
            </span>
          )
        }
      >
        <Button
          disabled={timing === null}
          onClick={() => timing !== null && copy(formatModeline(timing), "modeline")}
        >
          Copy modeline
        </Button>
        {user === null ? (
          <ButtonLink href={signInPath(`${pathname}?${query}`)}>Use in a profile</ButtonLink>
        ) : (
          <Button disabled={timing === null} onClick={() => setOpen(true)}>
            Use in a profile
          </Button>
        )}
        {timing === null || isOut ? (
          <Button kind="primary" disabled>
            Try on the bench
          </Button>
        ) : (
          <ButtonLink kind="primary" href={bench}>
            Try on the bench
          </ButtonLink>
        )}
      </FootBar>
      {timing === null || user === null ? null : (
        <ProfileDialog key={rasterToText(timing)} open={open} onClose={() => setOpen(false)} timing={timing} />
      )}
    </>
  );
}
