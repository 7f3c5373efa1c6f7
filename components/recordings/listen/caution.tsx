"use client";

import { Checkbox } from "@/components/ui/checkbox";
import { CautionIcon } from "@/components/ui/finding-icon";

/** A caution that has to be acknowledged before its act. */
export function Caution({ words, isRead, onRead }: { readonly words: string; readonly isRead: boolean; readonly onRead: (isRead: boolean) => void }) {
  return (
    <div className="border-l-3 border-text pl-3">
      <p className="flex items-start gap-2"><CautionIcon className="mt-0.5" /><span>{words}</span></p>
      <Checkbox label="I have read this" checked={isRead} onChange={onRead} />
    </div>
  );
}
