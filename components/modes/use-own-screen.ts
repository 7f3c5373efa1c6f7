"use client";

import { useEffect, useState } from "react";
import { useScreens } from "@/components/screens/use-screens";
import { useSignedIn } from "@/components/shell/signed-in";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import { DEFAULT_CHOICES } from "@/components/modes/store/choices";

/**
 * Puts the owner's own screen in the place of the one that a link only names, or tells of as it was then.
 *
 * @returns a sentence where the screen of the link is nobody's that is signed in here, else null
 */
export function useOwnScreen(): string | null {
  const user = useSignedIn();
  const { data, isError } = useScreens();
  const screen = useModes((state) => state.choices.screen);
  const { chooseScreen, updateScreen } = useModesActs();
  const [wasAway, setWasAway] = useState(false);
  const own = data?.find(({ id }) => id === screen.id);
  const isAway = screen.envelope === null && (user === null || isError || (data !== undefined && own === undefined));
  useEffect(() => {
    if (own !== undefined && JSON.stringify(own.envelope) !== JSON.stringify(screen.envelope))
      updateScreen({ id: own.id, envelope: own.envelope });
    else if (isAway) {
      chooseScreen(DEFAULT_CHOICES.screen);
      queueMicrotask(() => setWasAway(true));
    }
  }, [own, isAway, screen, chooseScreen, updateScreen]);
  return isAway || wasAway ? "The screen of the link is not among yours: a 525-line television stands in." : null;
}
