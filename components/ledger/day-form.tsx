import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";

/** The same page as it stood at the end of another day, in UTC. */
export function DayForm({ at }: { at: Date }) {
  return (
    <form className="mt-8 grid gap-3" method="get">
      <TextField
        defaultValue={at.toISOString().slice(0, 10)}
        hint="Days begin and end in UTC."
        label="As it stood on"
        name="at"
        type="date"
      />
      <Button type="submit">Show that day</Button>
    </form>
  );
}
