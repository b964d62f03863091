import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";

/** The same page as it stood at another second, in UTC. */
export function InstantForm({ at }: { at: Date }) {
  return (
    <form className="grid gap-3" method="get">
      <TextField
        defaultValue={at.toISOString().slice(0, 19)}
        hint="Date and time in UTC, the second included."
        label="Instant"
        name="at"
        step={1}
        type="datetime-local"
      />
      <Button kind="main" type="submit" wide>
        Show that instant
      </Button>
    </form>
  );
}
