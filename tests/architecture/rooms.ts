/** Which room may use which: a new edge is a line here, to be read and discussed. */
export const ROOM_EDGES: Record<string, readonly string[]> = {
  kernel: [],
  audio: [],
  fingerprint: [],
  jobs: ["kernel"],
  health: ["kernel", "jobs"],
  mail: ["kernel", "jobs"],
  uploads: ["kernel", "jobs"],
  payments: ["kernel", "jobs"],
  accounts: ["kernel", "jobs", "mail", "uploads"],
  catalogue: ["kernel", "jobs", "mail", "uploads", "accounts", "audio"],
  screening: ["kernel", "jobs", "mail", "uploads", "accounts", "fingerprint", "audio", "catalogue"],
  deliveries: ["kernel", "jobs", "mail", "uploads", "accounts", "catalogue", "screening", "audio"],
  review: ["kernel", "jobs", "mail", "uploads", "accounts", "screening", "deliveries", "catalogue", "audio"],
  productions: ["kernel", "jobs", "mail", "uploads", "accounts", "catalogue"],
  ledger: ["kernel", "jobs", "mail", "accounts", "payments"],
  licensing: [
    "kernel",
    "jobs",
    "mail",
    "uploads",
    "accounts",
    "catalogue",
    "screening",
    "productions",
    "ledger",
    "payments",
  ],
  reports: ["kernel", "jobs", "mail", "uploads", "accounts", "review", "screening", "licensing", "catalogue"],
  programmes: ["kernel", "jobs", "mail", "uploads", "accounts", "screening", "licensing", "productions"],
  web: ["kernel", "accounts"],
};

/** The only rooms that may import a vendor's SDK, and which. */
export const SDK_ROOMS: Record<string, string> = {
  stripe: "payments",
  resend: "mail",
  uploadthing: "uploads",
  "@react-email/render": "mail",
};

/** The only files outside `lib/kernel` and `lib/jobs` that may open the database. */
export const DATABASE_OPENERS = [
  "lib/accounts/auth-adapter.ts",
  "lib/commands/",
  "db/seed/",
  "tests/",
  "db/client.ts",
];

/** Route handlers that come from a library and not from our wrapper. */
export const FOREIGN_ROUTES: Record<string, string> = {
  "app/api/auth/[...nextauth]/route.ts": "next-auth's own handler; it checks its own CSRF token",
  "app/api/uploadthing/route.ts":
    "UploadThing's own handler; its middleware calls our verbs and its callback is signed",
};
