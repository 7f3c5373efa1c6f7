"use client";

import { useCallback } from "react";
import { useToast } from "@/components/ui/toast";

/** Copies a text and says so; where the browser does not allow it, the text is shown to be copied by hand. */
export function useCopy(): (text: string, name: string) => void {
  const toast = useToast();
  return useCallback(
    (text, name) => {
      // Without a secure context a browser has no clipboard.
      const clipboard: Clipboard | undefined = navigator.clipboard;
      const refused = () => toast({ text: `The browser does not allow copying. By hand: ${text}` });
      if (clipboard === undefined) return refused();
      clipboard.writeText(text).then(() => toast({ text: `Copied: ${name}.` }), refused);
    },
    [toast],
  );
}
