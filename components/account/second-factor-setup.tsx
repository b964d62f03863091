"use client";

import { beginSecondFactor } from "@/app/(account)/actions";
import { ActButton } from "./act-button";
import { CodeForm } from "./code-form";

interface SecondFactorSetupProps {
  isInUse: boolean;
  /** A secret that waits for its first code. */
  pending: { secret: string; qrPath: string; qrSize: number } | null;
}

export function SecondFactorSetup({ isInUse, pending }: SecondFactorSetupProps) {
  if (!pending) {
    return (
      <ActButton
        act={beginSecondFactor}
        busyWords="Preparing"
        input={{}}
        kind="plain"
        words={isInUse ? "Set up another one in its place" : "Set up a second factor"}
      />
    );
  }
  const grouped = pending.secret.replace(/(.{4})(?=.)/g, "$1 ");
  return (
    <div className="grid gap-6 sm:grid-cols-[11rem_minmax(0,1fr)]">
      <svg
        aria-label="The square to scan with an authenticator app"
        className="size-44 bg-page dark:bg-ink"
        role="img"
        shapeRendering="crispEdges"
        viewBox={`0 0 ${pending.qrSize} ${pending.qrSize}`}
      >
        <path className="fill-ink dark:fill-page" d={pending.qrPath} />
      </svg>
      <div className="grid content-start gap-4">
        <p className="max-w-measure">
          Scan the square with an authenticator app, or type this into it:{" "}
          <b className="font-strong figures">{grouped}</b>. Then write the code it shows.
        </p>
        {isInUse && (
          <p className="max-w-measure">
            The factor in use stays in use until you give this one’s first code.
          </p>
        )}
        <CodeForm button="Use this factor" demonstration={null} to="/account?after=factor" />
      </div>
    </div>
  );
}
