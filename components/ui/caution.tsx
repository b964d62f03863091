export const STANDING_CAUTION =
  "Similarity evidence is technical. It is not a finding of infringement or of originality, and absence of a match is not clearance.";

interface CautionProps {
  /** What was not compared, said before the standing sentence. */
  notCompared?: string;
  className?: string;
}

/** The standing sentence, on every hit, certificate, pre-check answer, licence record and report page. */
export function Caution({ notCompared, className }: CautionProps) {
  return (
    <p className={`max-w-measure text-small text-ink-soft ${className ?? ""}`}>
      {notCompared && `${notCompared} `}
      {STANDING_CAUTION}
    </p>
  );
}
