export const colour = {
  page: "#FDFEFE",
  ink: "#13222C",
  soft: "#4A5B66",
  line: "#C9D5DC",
  buff: "#F6ECD0",
  magenta: "#A3195B",
} as const;

/** Mail programs load no fonts of ours. */
export const SERIF = 'Georgia, "Times New Roman", serif';
export const SANS = 'system-ui, -apple-system, "Segoe UI", Roboto, "Helvetica Neue", Arial, sans-serif';
