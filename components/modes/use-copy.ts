"use client";

import { useToast } from "@/components/ui/toast";

/** Copies, and says so; where the browser does not let a page copy, the text is shown to be copied by hand. */
export function useCopy(): (text: string, what: string) => void {
  const toast = useToast();
  return (text, what) => {
    const shown = () => toast({ text: `Your browser does not let this page copy. ${what}: ${text}` });
    if (!("clipboard" in navigator)) return shown();
    navigator.clipboard.writeText(text).then(() => toast({ text: `${what} was copied.` }), shown);
  };
}
