import type { Metadata } from "next";
import { CueChart } from "@/components/cues/cue-chart";
import { CueFactList, CueRights } from "@/components/cues/cue-rights";
import { TextLink } from "@/components/ui/button";
import { Caution } from "@/components/ui/caution";
import { cueFacts, fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import { formatIsrc, formatIswc } from "@/lib/kernel/identifiers";
import { countryName } from "@/lib/licensing";
import { endingOf, letterOf } from "../../find/found";
import { unavailableWords } from "../../productions/shortlist-lines";
import { CueAside } from "./cue-aside";
import { alsoWords, describedAs, readCue } from "./read-cue";

type Props = { params: Promise<{ number: string }>; searchParams: Promise<{ production?: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { cue } = await readCue((await params).number);
  return { title: cue.title, description: cue.description };
}

export default async function CueScreen({ params, searchParams }: Props) {
  const { cue, detail, screening } = await readCue((await params).number);
  const { production } = await searchParams;
  const unavailable = unavailableWords(cue.availability);
  const libraryLink = <TextLink href={`/libraries/${cue.library.code}`}>{cue.library.name}</TextLink>;
  if (unavailable || !detail)
    return (
      <Page>
        <HeadSentence place={<>From {libraryLink}</>} size="huge">
          <Title>{cue.title}</Title> cannot be licensed at present.
        </HeadSentence>
        <StatusSentence className="mt-6 max-w-measure" mark="held">
          {unavailable}
        </StatusSentence>
        <Sentence className="mt-3">
          Licences already given stay in force. <TextLink href="/find">Find another cue</TextLink>.
        </Sentence>
      </Page>
    );
  const facts = cueFacts({
    durationS: cue.durationS,
    bpm: cue.bpm,
    musicalKey: cue.musicalKey,
    ending: endingOf(cue.ending),
    also: alsoWords(cue),
  });
  return (
    <Page
      aside={<CueAside cue={cue} productionId={production ?? null} />}
      asideLabel={`Licensing ${cue.title}`}
    >
      <HeadSentence place={<>From {libraryLink}</>} size="huge">
        <Title>{cue.title}</Title>, by {fmt.list(cue.writers)}.
      </HeadSentence>
      <Sentence className="mt-2" size="lead">
        {facts}
      </Sentence>
      <Sentence className="mt-1 mb-6">{cue.description}</Sentence>
      <CueChart
        cue={{ title: cue.title, number: cue.number, libraryName: cue.library.name }}
        detail={detail}
      />
      {cue.sections.length > 0 && (
        <Sentence className="mt-3" soft>
          {detail.sections
            .map(
              (section, index) =>
                `${[letterOf(index), section.words].filter(Boolean).join(" ")} from ${fmt.time(section.fromS)}`,
            )
            .join(", ")}
          .
        </Sentence>
      )}
      <CueRights
        libraryName={cue.library.name}
        oneStop={cue.oneStop}
        publishers={cue.publishersShares}
        refusedUses={cue.refusedUses}
        restricted={cue.restrictedTerritories.map(countryName)}
        writers={cue.writersShares}
      />
      <CueFactList
        deal={cue.deal}
        described={describedAs(cue)}
        isrcs={cue.versions.map((version) => {
          const isrc = cue.isrcs[version.recordingId] ?? null;
          return { label: version.label, isrc: isrc && formatIsrc(isrc) };
        })}
        iswc={cue.iswc && formatIswc(cue.iswc)}
        loudness={cue.loudness}
        number={cue.number}
        otherTitles={cue.otherTitles}
        yearRecorded={cue.yearRecorded}
      />
      <Section className="mt-8" head="Screening">
        {screening.certificate ? (
          <StatusSentence mark="tick">
            Screened on {fmt.date(screening.certificate.issuedAt)} against{" "}
            {fmt.count(screening.certificate.recordings, "recording")},{" "}
            {fmt.number(screening.certificate.hours, 1)}&nbsp;hours: {screening.certificate.words}
          </StatusSentence>
        ) : (
          <Sentence>It was listed before screening began here.</Sentence>
        )}
        <Caution className="mt-2" notCompared="Melody, harmony and lyrics were not compared." />
      </Section>
    </Page>
  );
}
