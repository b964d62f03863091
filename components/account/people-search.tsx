import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";

export function PeopleSearch({ text }: { text: string }) {
  return (
    <search className="mt-5 block max-w-[26rem]">
      <form action="/people" className="flex items-end gap-3">
        <TextField
          className="grow"
          defaultValue={text}
          label="Part of a name or address"
          name="text"
          optional
          type="search"
        />
        <Button type="submit">Find</Button>
      </form>
    </search>
  );
}
