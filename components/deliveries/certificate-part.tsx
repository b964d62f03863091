import { Caution } from "@/components/ui/caution";
import { Disclosure } from "@/components/ui/disclosure";
import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import type { VersionOnWire } from "./wire";

interface CertificateBody {
  durationS: number;
  index: { engineVersion: number; sequence: number; recordings: number; hours: number };
  comparisons: string[];
  notRun: string[];
  shortestStretchFound: string;
  notComparable: { startS: number; endS: number; reason: string }[];
  words: string;
  registersConsulted: string[];
}

/** The screening's certificate: what was compared, what was found, and what was not done. */
export function CertificatePart({ version, zone }: { version: VersionOnWire; zone: string }) {
  const { certificate } = version;
  if (!certificate) return null;
  const body = certificate.body as unknown as CertificateBody;
  return (
    <Disclosure className="mt-2" words="Show its screening certificate">
      <FactList
        nameWidth="10rem"
        rows={[
          { name: "Outcome", value: body.words, below: `Issued ${fmt.dateTime(certificate.issuedAt, zone)}` },
          {
            name: "Compared with",
            value: `${fmt.count(body.index.recordings, "recording")}, ${fmt.number(body.index.hours, 2)} hours`,
            below: `Index ${body.index.sequence}, engine version ${body.index.engineVersion}`,
          },
          { name: "Compared how", value: `${fmt.list(body.comparisons)}.` },
          { name: "Registers consulted", value: `${fmt.list(body.registersConsulted)}.` },
          { name: "Not done", value: `${fmt.list(body.notRun)}.` },
          { name: "Shortest stretch found", value: body.shortestStretchFound },
          {
            name: "Not comparable",
            value:
              body.notComparable.length === 0
                ? "no stretch"
                : fmt.list(
                    body.notComparable.map(
                      (span) => `${fmt.spanTenths(span.startS, span.endS)} (${span.reason})`,
                    ),
                  ),
          },
          {
            name: "SHA-256",
            value: <span className="text-small wrap-anywhere">{certificate.sha256}</span>,
            below: "of this certificate",
          },
        ]}
      />
      <Caution className="mt-3" notCompared="Melody, harmony and lyrics were not compared." />
    </Disclosure>
  );
}
