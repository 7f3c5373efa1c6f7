"use client";

import { Menu as MenuIcon } from "lucide-react";
import Link from "next/link";
import { usePathname } from "next/navigation";
import { classNames } from "@/components/ui/class-names";
import { Menu } from "@/components/ui/popover";
import type { MenuItem } from "@/components/ui/popover";
import { AccountMenu, accountItems, useSignOut } from "@/components/shell/account-menu";
import { useLink } from "@/components/shell/link-state";
import { currentItem, navigation } from "@/components/shell/navigation";
import { useSignedIn } from "@/components/shell/signed-in";
import { ThemeSwitch } from "@/components/shell/theme-switch";
import { PorchLamp } from "@/components/video/porch-lamp";

/** Wordmark with the lamp, the pages, the theme, the account. On a phone the pages are in a menu. */
export function SiteHeader() {
  const pathname = usePathname();
  const current = currentItem(pathname);
  return (
    <header className="gutter flex items-center gap-x-4 border-b border-line py-2.5 md:gap-x-7 md:py-3">
      <a
        href="#main"
        className="sr-only rounded-control bg-surface px-3 py-2 focus:not-sr-only focus:absolute focus:left-2 focus:top-2 focus:z-50"
      >
        Skip to the content
      </a>
      <Wordmark />
      <p aria-hidden className="heading flex-1 truncate text-center text-lg md:hidden">
        {current?.label ?? "backporch"}
      </p>
      <nav aria-label="Pages" className="hidden flex-1 gap-x-5 md:flex">
        {navigation.map(({ href, label }) => (
          <Link
            key={href}
            href={href}
            aria-current={current?.href === href ? "page" : undefined}
            className={classNames(
              "py-1.5 hover:text-text",
              current?.href === href ? "font-strong text-text shadow-[0_2px_0_var(--lamp)]" : "font-[500] text-muted",
            )}
          >
            {label}
          </Link>
        ))}
      </nav>
      <div className="hidden items-center gap-3 md:flex">
        <ThemeSwitch />
        <AccountMenu />
      </div>
      <div className="md:hidden">
        <PhoneMenu />
      </div>
    </header>
  );
}

function Wordmark() {
  const link = useLink();
  return (
    <Link href="/" className="flex items-center gap-2.5 rounded-control">
      <PorchLamp state={link.state} text={link.text} />
      <span className="heading hidden text-2xl md:inline">backporch</span>
      <span className="sr-only md:hidden">backporch</span>
    </Link>
  );
}

function PhoneMenu() {
  const user = useSignedIn();
  const signOut = useSignOut();
  const pages = navigation.map(({ href, label }): MenuItem => ({ kind: "link", href, label }));
  const account: readonly MenuItem[] =
    user === null ? [{ kind: "link", href: "/sign-in", label: "Sign in" }] : accountItems(signOut);
  return (
    <span className="flex items-center">
      <ThemeSwitch />
      <Menu
        trigger={
          <button
            type="button"
            aria-label="Menu"
            className="-mr-2 flex size-11 items-center justify-center rounded-control"
          >
            <MenuIcon aria-hidden size={22} />
          </button>
        }
        items={[...pages, { kind: "rule" }, ...account]}
      />
    </span>
  );
}
