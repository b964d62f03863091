interface MarkOfSedgeProps {
  sizePx?: number;
}

/** The mark: three unequal rays of sedge from one point on a short ground line. Decorative beside the name. */
export function MarkOfSedge({ sizePx = 30 }: MarkOfSedgeProps) {
  return (
    <svg aria-hidden className="shrink-0" height={sizePx} viewBox="0 0 30 30" width={sizePx}>
      <g className="stroke-ink" fill="none" strokeLinecap="round" strokeWidth="1.6">
        <path d="M5 25.5h20" />
        <path d="M14 25.5C12.9 18.6 10.4 12.9 5.8 8.4" />
        <path d="M14 25.5C14.2 16.4 15.2 9.4 17.6 2.8" />
        <path d="M14 25.5c2-4.7 5.2-8.5 10.2-11.2" />
      </g>
      <circle className="fill-magenta stroke-page" cx="14" cy="25.3" r="3.2" />
    </svg>
  );
}
