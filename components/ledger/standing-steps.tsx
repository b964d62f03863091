import type { ReactNode } from "react";
import { Mark, type MarkKind } from "@/components/ui/mark";

interface Step {
  key: string;
  mark: MarkKind;
  sentence: ReactNode;
  below: ReactNode;
}

/** Where the money stands, in the order it travels: held, available, paid. */
export function StandingSteps({ steps }: { steps: readonly Step[] }) {
  return (
    <ol className="mt-6 grid gap-4 sm:auto-cols-fr sm:grid-flow-col sm:gap-6">
      {steps.map((step, index) => (
        <li className="grid grid-cols-[1.4375rem_minmax(0,1fr)] sm:block" key={step.key}>
          <span className="flex items-center gap-1.5 self-start pt-[0.22em] sm:pt-0">
            <Mark kind={step.mark} sizePx={15} />
            {index < steps.length - 1 && (
              <span aria-hidden className="-mr-5 hidden h-0 grow border-t-[1.5px] border-ink sm:block" />
            )}
          </span>
          <div className="sm:mt-2">
            <p>{step.sentence}</p>
            <p className="text-ink-soft">{step.below}</p>
          </div>
        </li>
      ))}
    </ol>
  );
}
