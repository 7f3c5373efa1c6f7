"use client";

import { X } from "lucide-react";
import { Toast } from "radix-ui";
import { createContext, useCallback, useContext, useMemo, useRef, useState } from "react";
import type { ReactNode } from "react";
import { Button } from "@/components/ui/button";

/** More than these at once and the oldest leaves. */
const MAX_TOASTS = 4;
/** Time to read a sentence and reach for Undo. */
const TOAST_MS = 10_000;

export type ToastMessage = {
  readonly text: string;
  /** Takes the act back. */
  readonly undo?: { readonly label?: string; readonly onUndo: () => void };
};

type Show = (message: ToastMessage) => void;
type Entry = ToastMessage & { readonly id: number };

const ToastContext = createContext<Show | null>(null);

/** What just happened, at the foot of the page, with Undo where there is one. */
export function ToastProvider({ children }: { readonly children: ReactNode }) {
  const [entries, setEntries] = useState<readonly Entry[]>([]);
  const nextId = useRef(1);
  const show = useCallback<Show>((message) => {
    const id = nextId.current;
    nextId.current += 1;
    setEntries((current) => [...current.slice(1 - MAX_TOASTS), { ...message, id }]);
  }, []);
  const drop = useCallback((id: number) => setEntries((current) => current.filter((entry) => entry.id !== id)), []);
  const value = useMemo(() => show, [show]);
  return (
    <ToastContext.Provider value={value}>
      <Toast.Provider duration={TOAST_MS} label="Notice" swipeDirection="down">
        {children}
        {entries.map((entry) => (
          <ToastEntry key={entry.id} entry={entry} onGone={drop} />
        ))}
        <Toast.Viewport className="fixed bottom-0 right-0 z-50 flex w-full max-w-[440px] flex-col gap-2 p-4 outline-none" />
      </Toast.Provider>
    </ToastContext.Provider>
  );
}

function ToastEntry({ entry, onGone }: { readonly entry: Entry; readonly onGone: (id: number) => void }) {
  const { undo } = entry;
  return (
    <Toast.Root
      onOpenChange={(open) => {
        if (!open) onGone(entry.id);
      }}
      className="appears flex items-center gap-3 rounded-control border border-edge bg-surface py-2 pl-4 pr-2 shadow-xl"
    >
      <Toast.Description className="flex-1">{entry.text}</Toast.Description>
      {undo === undefined ? null : (
        <Toast.Action asChild altText={undo.label ?? "Undo"}>
          <Button size="small" onClick={undo.onUndo}>
            {undo.label ?? "Undo"}
          </Button>
        </Toast.Action>
      )}
      <Toast.Close
        aria-label="Close"
        className="flex size-8 items-center justify-center rounded-control text-muted hover:text-text"
      >
        <X aria-hidden size={16} />
      </Toast.Close>
    </Toast.Root>
  );
}

/** Shows a notice. Only under `ToastProvider`. */
export function useToast(): Show {
  const show = useContext(ToastContext);
  if (show === null) throw new Error("useToast stands outside ToastProvider");
  return show;
}
