"use client";

import { DropdownMenu, Popover as PopoverPrimitive, Tooltip as TooltipPrimitive } from "radix-ui";
import Link from "next/link";
import type { ReactElement, ReactNode } from "react";

const panelLook = "appears z-50 rounded-control border border-edge bg-surface text-text shadow-xl";

/** Text that helps and is not needed: shown on hover and on focus. */
export function Tooltip({ text, children }: { readonly text: string; readonly children: ReactElement }) {
  return (
    <TooltipPrimitive.Root delayDuration={300}>
      <TooltipPrimitive.Trigger asChild>{children}</TooltipPrimitive.Trigger>
      <TooltipPrimitive.Portal>
        <TooltipPrimitive.Content
          sideOffset={6}
          collisionPadding={8}
          className={`${panelLook} max-w-72 px-3 py-1.5 text-sm`}
        >
          {text}
        </TooltipPrimitive.Content>
      </TooltipPrimitive.Portal>
    </TooltipPrimitive.Root>
  );
}

/** A small panel beside its trigger. */
export function Popover({
  trigger,
  label,
  children,
}: {
  readonly trigger: ReactElement;
  readonly label: string;
  readonly children: ReactNode;
}) {
  return (
    <PopoverPrimitive.Root>
      <PopoverPrimitive.Trigger asChild>{trigger}</PopoverPrimitive.Trigger>
      <PopoverPrimitive.Portal>
        <PopoverPrimitive.Content
          aria-label={label}
          sideOffset={6}
          collisionPadding={12}
          className={`${panelLook} max-w-[min(92vw,420px)] p-4`}
        >
          {children}
        </PopoverPrimitive.Content>
      </PopoverPrimitive.Portal>
    </PopoverPrimitive.Root>
  );
}

export type MenuItem =
  | { readonly kind: "link"; readonly label: string; readonly href: string; readonly download?: boolean }
  | {
      readonly kind: "act";
      readonly label: string;
      readonly onAct: () => void;
      readonly disabled?: boolean;
      readonly tone?: "halt";
    }
  | { readonly kind: "rule" };

const itemLook =
  "flex min-h-9 w-full cursor-pointer items-center rounded-[5px] px-3 py-1.5 outline-none select-none data-[disabled]:opacity-45 data-[highlighted]:bg-sunk";

function MenuEntry({ item }: { readonly item: MenuItem }) {
  switch (item.kind) {
    case "rule":
      return <DropdownMenu.Separator className="my-1 h-px bg-line" />;
    case "act":
      return (
        <DropdownMenu.Item
          disabled={item.disabled}
          onSelect={item.onAct}
          className={item.tone === "halt" ? `${itemLook} text-halt` : itemLook}
        >
          {item.label}
        </DropdownMenu.Item>
      );
    case "link":
      return (
        <DropdownMenu.Item asChild>
          {item.download === true ? (
            <a href={item.href} download className={itemLook}>
              {item.label}
            </a>
          ) : (
            <Link href={item.href} className={itemLook}>
              {item.label}
            </Link>
          )}
        </DropdownMenu.Item>
      );
  }
}

/** A menu under a button. */
export function Menu({
  trigger,
  items,
  align = "end",
}: {
  readonly trigger: ReactElement;
  readonly items: readonly MenuItem[];
  readonly align?: "start" | "end";
}) {
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger asChild>{trigger}</DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content align={align} sideOffset={6} collisionPadding={8} className={`${panelLook} min-w-48 p-1`}>
          {items.map((item, index) => (
            <MenuEntry key={item.kind === "rule" ? `rule-${index}` : item.label} item={item} />
          ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
