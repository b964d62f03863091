"use client";

import { useState } from "react";
import { useForm, useWatch } from "react-hook-form";
import { Button } from "@/components/ui/button";
import { SelectField, TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/problem";
import { notify } from "@/components/ui/toaster";
import { type RateCard, Use } from "@/lib/licensing/rate-card";

interface UseFormProps {
  productionId: string;
  use: Use | null;
  card: RateCard;
  countries: readonly { code: string; name: string }[];
  setUse: (input: {
    productionId: string;
    use: Record<string, unknown> | null;
  }) => Promise<{ ok: boolean; message?: string }>;
  priceProduction: (input: { productionId: string }) => Promise<{ ok: boolean; message?: string }>;
}

interface Fields {
  mediaClass: string;
  territory: string;
  term: string;
  band: string;
  episodes: string;
  cutdowns: string;
}

const PERPETUAL = "perpetual";

function fieldsOf(use: Use | null, card: RateCard): Fields {
  const territory = use?.territory;
  return {
    mediaClass: use?.mediaClass ?? "",
    territory: !territory
      ? ""
      : territory.kind === "world"
        ? "world"
        : territory.kind === "region"
          ? `region:${territory.region}`
          : `country:${territory.country}`,
    term: use ? String(use.termMonths ?? PERPETUAL) : String(card.terms[0]?.months ?? PERPETUAL),
    band: use?.tier && "band" in use.tier ? String(use.tier.band) : "",
    episodes: String(use?.episodes ?? 1),
    cutdowns: String(use?.cutdowns ?? 0),
  };
}

function wantedUse(fields: Fields, row: RateCard["classes"][number] | undefined) {
  const [kind = "", code = ""] = fields.territory.split(":");
  const territory =
    row?.worldIncluded || kind === "world"
      ? { kind: "world" as const }
      : kind === "region"
        ? { kind: "region" as const, region: code }
        : { kind: "country" as const, country: code };
  return Use.safeParse({
    mediaClass: fields.mediaClass,
    territory,
    termMonths: fields.term === PERPETUAL ? null : Number(fields.term),
    ...(row?.tier.kind === "bands" && fields.band !== "" ? { tier: { band: Number(fields.band) } } : {}),
    episodes: row?.perEpisode ? Number(fields.episodes) : 1,
    cutdowns: row?.cutdowns ? Number(fields.cutdowns) : 0,
  });
}

/** What the production is licensed for: media, territory, term and size. Every price beside a cue is then for this. */
export function UseForm({ productionId, use, card, countries, setUse, priceProduction }: UseFormProps) {
  const [problem, setProblem] = useState<string | null>(null);
  const { register, handleSubmit, control, formState } = useForm<Fields>({
    defaultValues: fieldsOf(use, card),
  });
  const mediaClass = useWatch({ control, name: "mediaClass" });
  const row = card.classes.find(({ code }) => code === mediaClass);
  const save = handleSubmit(async (fields) => {
    const wanted = wantedUse(fields, row);
    if (!wanted.success) {
      setProblem("Choose media, territory and term.");
      return;
    }
    const kept = await setUse({ productionId, use: wanted.data });
    const priced = kept.ok ? await priceProduction({ productionId }) : kept;
    setProblem(priced.ok ? null : (priced.message ?? "It could not be kept."));
    if (priced.ok) notify({ title: "Kept. Every price here is now for this use." });
  });
  return (
    <form className="grid max-w-measure gap-3 sm:grid-cols-2" onSubmit={save}>
      <SelectField
        className="sm:col-span-2"
        label="Media"
        options={card.classes.map(({ code, words }) => ({ value: code, label: words }))}
        placeholder="Choose the media"
        {...register("mediaClass", { required: "Choose the media." })}
        error={formState.errors.mediaClass?.message}
      />
      {row?.worldIncluded ? (
        <p className="self-end pb-2 text-small text-ink-soft">Territory: World, included in this class.</p>
      ) : (
        <SelectField
          error={formState.errors.territory?.message}
          label="Territory"
          options={[
            ...card.regions.map(({ code, words }) => ({ value: `region:${code}`, label: words })),
            { value: "world", label: "World" },
            ...countries.map(({ code, name }) => ({ value: `country:${code}`, label: name })),
          ]}
          placeholder="Choose a territory"
          {...register("territory", { required: "Choose a territory." })}
        />
      )}
      <SelectField
        label="Term"
        options={card.terms.map(({ months, words }) => ({
          value: String(months ?? PERPETUAL),
          label: words,
        }))}
        {...register("term")}
      />
      {row?.tier.kind === "bands" && (
        <SelectField
          error={formState.errors.band?.message}
          label={`Size: ${row.tier.measure}`}
          options={row.tier.bands.map((band, index) => ({ value: String(index), label: band.words }))}
          placeholder="Choose a size"
          {...register("band", { required: "Say how large the use is." })}
        />
      )}
      {row?.perEpisode && (
        <TextField
          inputMode="numeric"
          label="Episodes"
          max={52}
          min={1}
          type="number"
          {...register("episodes")}
        />
      )}
      {row?.cutdowns && (
        <TextField
          inputMode="numeric"
          label="Extra cutdowns"
          max={100}
          min={0}
          type="number"
          {...register("cutdowns")}
        />
      )}
      <div className="sm:col-span-2">
        {problem && <Problem live>{problem}</Problem>}
        <Button busy={formState.isSubmitting && "Keeping"} type="submit">
          Keep this use
        </Button>
      </div>
    </form>
  );
}
