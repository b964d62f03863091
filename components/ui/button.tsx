import Link from "next/link";
import type { ComponentPropsWithRef, ReactNode } from "react";
import { cx } from "./cx";

export type ButtonKind = "main" | "plain" | "quiet";

const BOX =
  "inline-flex items-center justify-center gap-2 rounded-plain border-[1.5px] text-center text-body font-strong cursor-pointer disabled:cursor-default";

const KINDS: Record<ButtonKind, string> = {
  main: `${BOX} border-magenta bg-magenta text-page hover:not-disabled:border-ink disabled:border-ink-soft disabled:bg-page disabled:text-ink-soft`,
  plain: `${BOX} border-ink bg-transparent text-ink hover:not-disabled:bg-page disabled:border-dashed disabled:border-ink-soft disabled:text-ink-soft`,
  quiet: "link target inline-block min-h-6 min-w-6 text-left disabled:text-ink-soft disabled:no-underline",
};

const SIZES = { usual: "min-h-[42px] px-4 py-1.5", small: "min-h-8 px-3 py-0.5" };

interface Look {
  /** main is magenta and stands once on a screen; plain has an ink border; quiet looks like a link */
  kind?: ButtonKind | undefined;
  size?: keyof typeof SIZES | undefined;
  /** As wide as its place. */
  wide?: boolean | undefined;
}

function look({ kind = "plain", size = "usual", wide }: Look, className: string | undefined): string {
  return cx(KINDS[kind], kind !== "quiet" && SIZES[size], wide && "w-full", className);
}

export interface ButtonProps extends ComponentPropsWithRef<"button">, Look {
  /** Words in place of the label while the action runs: "Ordering". The button is inert meanwhile. */
  busy?: string | false | undefined;
  children: ReactNode;
}

export function Button({ kind, size, wide, busy, className, children, type, ...rest }: ButtonProps) {
  return (
    <button
      {...rest}
      aria-busy={busy ? true : undefined}
      className={look({ kind, size, wide }, className)}
      disabled={busy ? true : rest.disabled}
      type={type ?? "button"}
    >
      {busy || children}
    </button>
  );
}

interface ButtonLinkProps extends Look {
  href: string;
  children: ReactNode;
  className?: string;
  /** For files: a plain anchor with this download name, or true. */
  download?: boolean | string;
  "aria-label"?: string;
}

export function ButtonLink({ kind, size, wide, className, href, download, ...rest }: ButtonLinkProps) {
  const classes = look({ kind, size, wide }, className);
  if (download !== undefined) return <a {...rest} className={classes} download={download} href={href} />;
  return <Link {...rest} className={classes} href={href} />;
}

interface TextLinkProps {
  href: string;
  children: ReactNode;
  className?: string;
  lang?: string;
}

/** A link inside a sentence. */
export function TextLink({ className, ...rest }: TextLinkProps) {
  return <Link {...rest} className={cx("link target", className)} />;
}
