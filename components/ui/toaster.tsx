"use client";

import { Toast } from "@base-ui/react/toast";
import { Button } from "./button";
import { Mark } from "./mark";

const manager = Toast.createToastManager();

interface Notice {
  /** What happened: "Kept in the shortlist of episode 4." */
  title: string;
  description?: string;
  /** warn stays until it is closed and is read at once */
  kind?: "done" | "warn";
  /** One way back: { words: "Undo", run } */
  action?: { words: string; run: () => void };
}

/** Says in passing that something was done; never the only place where a fact is shown. */
export function notify({ title, description, kind = "done", action }: Notice): void {
  manager.add({
    title,
    ...(description ? { description } : {}),
    type: kind,
    priority: kind === "warn" ? "high" : "low",
    timeout: kind === "warn" || action ? 0 : 8000,
    ...(action ? { actionProps: { children: action.words, onClick: action.run } } : {}),
  });
}

function Notices() {
  const { toasts } = Toast.useToastManager();
  return toasts.map((toast) => (
    <Toast.Root
      className="rounded-plain border border-ink bg-page text-ink data-ending-style:opacity-0 data-limited:hidden"
      key={toast.id}
      swipeDirection="right"
      toast={toast}
    >
      <Toast.Content className="grid grid-cols-[1.4375rem_minmax(0,1fr)_auto] gap-x-1 p-3">
        <Mark className="mt-[0.22em]" kind={toast.type === "warn" ? "warn" : "done"} />
        <div>
          <Toast.Title render={<p />} className={toast.type === "warn" ? "text-magenta" : undefined} />
          <Toast.Description className="text-small text-ink-soft" />
          {toast.actionProps && <Toast.Action className="link target min-h-6" />}
        </div>
        <Toast.Close render={<Button kind="quiet">Close</Button>} />
      </Toast.Content>
    </Toast.Root>
  ));
}

/** Mounted once, by UiProvider. */
export function Toaster() {
  return (
    <Toast.Provider limit={3} toastManager={manager}>
      <Toast.Portal>
        <Toast.Viewport className="fixed bottom-4 left-4 z-60 flex w-[24rem] max-w-[calc(100vw-2rem)] flex-col gap-2">
          <Notices />
        </Toast.Viewport>
      </Toast.Portal>
    </Toast.Provider>
  );
}
