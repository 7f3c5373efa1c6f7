import Link from "next/link";
import type { ComponentProps, ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";

export type ButtonKind = "plain" | "primary" | "quiet" | "halt";
export type ButtonSize = "small" | "normal" | "large";

type Look = { readonly kind?: ButtonKind; readonly size?: ButtonSize };

const kinds: Readonly<Record<ButtonKind, string>> = {
  plain: "border border-edge bg-surface text-text enabled:hover:border-text",
  primary: "border border-lamp bg-lamp text-on-lamp enabled:hover:brightness-110",
  quiet: "border border-transparent text-text enabled:hover:bg-sunk",
  halt: "border border-halt bg-surface text-halt enabled:hover:bg-halt enabled:hover:text-bg",
};

const sizes: Readonly<Record<ButtonSize, string>> = {
  small: "min-h-7 px-2.5 py-0.5 text-sm",
  normal: "min-h-9 px-3.5 py-1.5 text-[14px]",
  large: "min-h-11 px-5 py-2.5 text-lg",
};

function look({ kind = "plain", size = "normal" }: Look): string {
  return classNames(
    "inline-flex items-center justify-center gap-2 rounded-control text-center font-button no-underline",
    "disabled:cursor-not-allowed disabled:opacity-45 aria-disabled:cursor-not-allowed aria-disabled:opacity-45",
    kinds[kind],
    sizes[size],
  );
}

export type ButtonProps = ComponentProps<"button"> & Look & { readonly icon?: ReactNode };

/** A button names its act ("Back up"), and keeps the name through the flow. */
export function Button({ kind, size, icon, className, children, type = "button", ...rest }: ButtonProps) {
  return (
    <button type={type} className={classNames(look({ kind, size }), className)} {...rest}>
      {icon}
      {children}
    </button>
  );
}

export type ButtonLinkProps = ComponentProps<typeof Link> & Look & { readonly icon?: ReactNode };

/** Looks like a button, goes somewhere. */
export function ButtonLink({ kind, size, icon, className, children, ...rest }: ButtonLinkProps) {
  return (
    <Link className={classNames(look({ kind, size }), className)} {...rest}>
      {icon}
      {children}
    </Link>
  );
}

/** A square button with an icon alone; `label` is its name. */
export function IconButton({
  label,
  className,
  children,
  type = "button",
  ...rest
}: ComponentProps<"button"> & { readonly label: string }) {
  return (
    <button
      type={type}
      aria-label={label}
      title={label}
      className={classNames(
        "inline-flex size-9 items-center justify-center rounded-control border border-transparent text-muted",
        "enabled:hover:border-edge enabled:hover:text-text disabled:opacity-45",
        className,
      )}
      {...rest}
    >
      {children}
    </button>
  );
}
