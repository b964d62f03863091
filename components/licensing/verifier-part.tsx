import { ButtonLink, TextLink } from "@/components/ui/button";
import { AsideTitle } from "@/components/ui/page";

/** The same answer without this site: what to keep, and what to run. */
export function VerifierPart({ proof }: { proof?: string }) {
  return (
    <div>
      <AsideTitle below="The same answer on your own machine, also when this site is gone.">
        Check it without us
      </AsideTitle>
      <ol className="grid list-decimal gap-2 pl-6 marker:font-strong">
        <li>Keep the signed record as JSON. It holds everything that the page says.</li>
        <li>
          Take the{" "}
          <a className="link target" download href="/verify/sedgewren-verify.mjs">
            verifier
          </a>{" "}
          and the{" "}
          <a className="link target" download="sedgewren-keys.json" href="/api/records/keys">
            list of public keys
          </a>
          ; the{" "}
          <a className="link target" download="sedgewren-roots.json" href="/api/records/roots">
            signed roots
          </a>{" "}
          show that nothing was slipped in later.
        </li>
        <li>
          Run{" "}
          <span className="font-figures text-small wrap-anywhere">
            node sedgewren-verify.mjs record.json sedgewren-keys.json
          </span>
          . It says genuine, or which part was altered. It opens no connection.
        </li>
      </ol>
      {proof && (
        <div className="mt-4 grid gap-2.5">
          <ButtonLink download href={`/api/check/${proof}/file`} kind="main" wide>
            Download the signed record
          </ButtonLink>
        </div>
      )}
      {!proof && (
        <p className="mt-3 text-small text-ink-soft">
          For programs: <TextLink href="/api/records/keys">the keys</TextLink> and, by proof code,
          /api/check/CODE.
        </p>
      )}
    </div>
  );
}
