"use client";

import { Dialog as Base } from "@base-ui/react/dialog";
import type { ReactElement, ReactNode } from "react";
import { Button } from "./button";

interface DialogProps {
  title: ReactNode;
  /** One sentence: what will happen. */
  description?: ReactNode;
  children?: ReactNode;
  /** The buttons; a quiet "Close" stands beside them. */
  actions?: ReactNode;
  closeWord?: string;
  /** The button that opens it; leave out when `open` is controlled. */
  trigger?: ReactElement;
  open?: boolean;
  onOpenChange?: (open: boolean) => void;
}

export function Dialog(props: DialogProps) {
  const { title, description, children, actions, closeWord = "Close", trigger, open, onOpenChange } = props;
  const control = open === undefined ? {} : { open };
  return (
    <Base.Root {...control} onOpenChange={(next) => onOpenChange?.(next)}>
      {trigger && <Base.Trigger render={trigger} />}
      <Base.Portal>
        <Base.Backdrop className="fixed inset-0 z-40 min-h-dvh bg-shade" />
        <Base.Popup className="fixed top-1/2 left-1/2 z-50 flex max-h-[calc(100dvh-2rem)] w-[34rem] max-w-[calc(100vw-2rem)] -translate-x-1/2 -translate-y-1/2 flex-col overflow-y-auto rounded-plain border border-ink bg-page p-5 text-ink sm:p-6">
          <Base.Title className="text-head leading-tight font-strong">{title}</Base.Title>
          {description && <Base.Description className="mt-1 max-w-measure">{description}</Base.Description>}
          {children && <div className="mt-4">{children}</div>}
          <div className="mt-5 flex flex-wrap items-center gap-x-5 gap-y-2">
            {actions}
            <Base.Close render={<Button kind="quiet">{closeWord}</Button>} />
          </div>
        </Base.Popup>
      </Base.Portal>
    </Base.Root>
  );
}

/** Put round an action that also closes the dialog it stands in. */
export function DialogClose({ children }: { children: ReactElement }) {
  return <Base.Close render={children} />;
}
