import { describe, expect, test } from "vitest";
import { bassNotes } from "@/fixtures/audio/bass-lines";
import { chordNotes } from "@/fixtures/audio/chord-patterns";
import { planForm } from "@/fixtures/audio/form";
import { themeNotes } from "@/fixtures/audio/melody";
import type { Note } from "@/fixtures/audio/note";
import type { Score, ThemePart } from "@/fixtures/audio/score";
import { scoreOf } from "@/fixtures/audio/scores";
import { cafeNewTake, lampsOfThePier, nineMilesUp } from "@/fixtures/audio/scores-cases";

function themes(score: Score): ThemePart[] {
  return score.layers.flatMap((layer) => layer.parts).filter((part) => part.kind === "theme");
}

/** Pitch and place of the tune's notes in one section, counted from the section's start. */
function tune(score: Score, label: string): { beat: number; midi: number }[] {
  const form = planForm(score);
  const section = form.sections.find((row) => row.label === label)!;
  return themeNotes(score, form, themes(score)[0]!)
    .filter((note) => note.beat >= section.startBeat && note.beat < section.endBeat)
    .map((note) => ({ beat: note.beat - section.startBeat, midi: note.midi }));
}

function allNotes(score: Score, beats: number): Note[] {
  const form = planForm(score);
  return score.layers
    .flatMap((layer) => layer.parts)
    .flatMap((part) =>
      part.kind === "theme"
        ? themeNotes(score, form, part)
        : part.kind === "chords"
          ? chordNotes(score, form, part)
          : part.kind === "bass"
            ? bassNotes(score, form, part)
            : [],
    )
    .filter((note) => note.beat < beats);
}

describe("what the planted cases play", () => {
  test("P-19 is cue 30's own notes, faster, in other hands", () => {
    const again = cafeNewTake();
    const notes = allNotes(scoreOf(30), 160);
    expect(notes.length).toBeGreaterThan(200);
    expect(allNotes(again, 160)).toEqual(notes);
    expect([again.bpm, scoreOf(30).bpm]).toEqual([90, 86]);
    expect(again.takeSeed).not.toBe(scoreOf(30).takeSeed);
  });

  test("P-20's tune is cue 9's, one tone lower", () => {
    for (const label of ["A", "B"]) {
      const original = tune(scoreOf(9), label);
      expect(original.length).toBeGreaterThan(12);
      const copy = tune(lampsOfThePier, label);
      expect(copy).toEqual(original.slice(0, copy.length));
      expect(copy.length).toBeGreaterThan(12);
    }
    expect([lampsOfThePier.bpm, lampsOfThePier.transpose]).toEqual([74, -2]);
  });

  test("P-21 keeps cue 18's tempo and instruments and none of its tune", () => {
    const other = nineMilesUp();
    const original = scoreOf(18);
    expect([other.bpm, other.tonic, other.layers]).toEqual([original.bpm, original.tonic, original.layers]);
    expect(tune(other, "climb").slice(0, 8)).not.toEqual(tune(original, "wave 2").slice(0, 8));
  });

  test("cues 6 and 29 play the same old tune", () => {
    const tunes = [6, 29].map((number) =>
      tune(scoreOf(number), "A").map((note) => ({ ...note, midi: note.midi % 12 })),
    );
    expect(tunes[0]!.length).toBeGreaterThan(30);
    expect(tunes[0]).toEqual(tunes[1]);
  });
});
