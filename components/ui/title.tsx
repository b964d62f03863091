import { cx } from "./cx";

interface TitleProps {
  children: string;
  /** The language of the title where it is not English: "fr". */
  lang?: string | undefined;
  className?: string;
}

/** The title of a musical work, and nothing else: the only italic on the site. */
export function Title({ children, lang, className }: TitleProps) {
  return (
    <cite className={cx("title-work", className)} lang={lang}>
      {children}
    </cite>
  );
}
