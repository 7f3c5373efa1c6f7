"use client";

import { X } from "lucide-react";
import { AlertDialog, Dialog as Primitive } from "radix-ui";
import type { ReactNode } from "react";
import { Button } from "@/components/ui/button";
import type { ButtonKind } from "@/components/ui/button";

const overlayLook = "appears fixed inset-0 z-40 bg-cabinet/60";
const panelLook =
  "appears fixed top-1/2 left-1/2 z-50 flex max-h-[min(88dvh,760px)] w-[min(calc(100vw-24px),560px)] -translate-x-1/2 -translate-y-1/2 flex-col rounded-control border border-edge bg-surface text-text shadow-2xl";

export type DialogProps = {
  readonly open: boolean;
  readonly onOpenChange: (open: boolean) => void;
  readonly title: string;
  readonly description?: ReactNode;
  readonly children: ReactNode;
  /** Buttons at the foot; the primary one last. */
  readonly foot?: ReactNode;
};

/** A panel over the page; Esc and the cross close it. */
export function Dialog({ open, onOpenChange, title, description, children, foot }: DialogProps) {
  return (
    <Primitive.Root open={open} onOpenChange={onOpenChange}>
      <Primitive.Portal>
        <Primitive.Overlay className={overlayLook} />
        <Primitive.Content
          className={panelLook}
          {...(description === undefined ? { "aria-describedby": undefined } : {})}
        >
          <div className="flex items-start justify-between gap-4 border-b border-line px-5 py-4">
            <div>
              <Primitive.Title className="text-xl">{title}</Primitive.Title>
              {description === undefined ? null : (
                <Primitive.Description className="mt-1 text-muted">{description}</Primitive.Description>
              )}
            </div>
            <Primitive.Close
              aria-label="Close"
              className="-mr-2 -mt-1 flex size-9 shrink-0 items-center justify-center rounded-control text-muted hover:text-text"
            >
              <X aria-hidden size={18} />
            </Primitive.Close>
          </div>
          <div className="min-h-0 flex-1 overflow-y-auto px-5 py-4">{children}</div>
          {foot === undefined ? null : (
            <div className="flex flex-wrap justify-end gap-3 border-t border-line px-5 py-3">{foot}</div>
          )}
        </Primitive.Content>
      </Primitive.Portal>
    </Primitive.Root>
  );
}

export type ConfirmProps = {
  readonly open: boolean;
  readonly onOpenChange: (open: boolean) => void;
  /** The question, as "Delete this backup?" */
  readonly title: string;
  /** What happens then, in a sentence. */
  readonly description: ReactNode;
  /** The act, as the button that asked named it. */
  readonly act: string;
  readonly actKind?: ButtonKind;
  readonly cancel?: string;
  readonly onAct: () => void;
  readonly children?: ReactNode;
};

/** Asks before an act that has no undo. The focus begins on the way out. */
export function Confirm({
  open,
  onOpenChange,
  title,
  description,
  act,
  actKind = "primary",
  cancel = "Cancel",
  onAct,
  children,
}: ConfirmProps) {
  return (
    <AlertDialog.Root open={open} onOpenChange={onOpenChange}>
      <AlertDialog.Portal>
        <AlertDialog.Overlay className={overlayLook} />
        <AlertDialog.Content className={panelLook}>
          <div className="min-h-0 flex-1 overflow-y-auto px-5 pb-4 pt-5">
            <AlertDialog.Title className="text-xl">{title}</AlertDialog.Title>
            <AlertDialog.Description className="mt-2 text-muted">{description}</AlertDialog.Description>
            {children}
          </div>
          <div className="flex flex-wrap justify-end gap-3 border-t border-line px-5 py-3">
            <AlertDialog.Cancel asChild>
              <Button>{cancel}</Button>
            </AlertDialog.Cancel>
            <AlertDialog.Action asChild>
              <Button kind={actKind} onClick={onAct}>
                {act}
              </Button>
            </AlertDialog.Action>
          </div>
        </AlertDialog.Content>
      </AlertDialog.Portal>
    </AlertDialog.Root>
  );
}
