/** The start commands are plain JavaScript: they run before a compiler is installed. */
declare module "@/lib/commands/start/*.mjs";
