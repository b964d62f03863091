import Link from "next/link";
import type { ComponentPropsWithRef, ReactNode } from "react";
import { cx } from "./cx";

export type ButtonKind = "main" | "plain" | "quiet";

const BOX =
  "inline-flex min-h-[42px] items-center justify-center gap-2 rounded-plain border-[1.5px] px-4 py-1.5 text-center text-body font-strong cursor-pointer disabled:cursor-default aria-disabled:cursor-default";

const KINDS: Record<ButtonKind, string> = {
  main: `${BOX} border-magenta bg-magenta text-page hover:not-disabled:border-ink disabled:border-ink-soft disabled:bg-page disabled:text-ink-soft`,
  plain: `${BOX} border-ink bg-transparent text-ink hover:not-disabled:bg-page disabled:border-ink-soft disabled:text-ink-soft disabled:border-dashed`,
  quiet: "link target inline-block min-h-6 min-w-6 text-left disabled:text-ink-soft disabled:no-underline",
};

export interface ButtonProps extends ComponentPropsWithRef<"button"> {
  /** main is magenta and stands once on a screen; plain has an ink border; quiet looks like a link */
  kind?: ButtonKind;
  wide?: boolean;
  /** Words in place of the label while the action runs: "Ordering". The button is inert meanwhile. */
  busy?: string | false | undefined;
  children: ReactNode;
}

export function Button({ kind = "plain", wide, busy, className, children, type, ...rest }: ButtonProps) {
  return (
    <button
      {...rest}
      aria-busy={busy ? true : undefined}
      className={cx(KINDS[kind], wide && "w-full", className)}
      disabled={busy ? true : rest.disabled}
      type={type ?? "button"}
    >
      {busy || children}
    </button>
  );
}

interface ButtonLinkProps {
  href: string;
  kind?: ButtonKind;
  wide?: boolean;
  children: ReactNode;
  className?: string;
  /** For files: a plain anchor with this download name, or true. */
  download?: boolean | string;
  "aria-label"?: string;
}

export function ButtonLink({ kind = "plain", wide, className, href, download, ...rest }: ButtonLinkProps) {
  const classes = cx(KINDS[kind], wide && "w-full", className);
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
