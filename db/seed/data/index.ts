export { type JudgedBrief, judgedBriefs, type StructuredBrief } from "./briefs";
export { type CaseRow, plantedCases } from "./cases";
export {
  type ComposerKey,
  type CueRow,
  keyLabel,
  type LibraryCode,
  type SharedLoopId,
  versionIsrc,
} from "./cue-row";
export { type CueSection, type CueTimings, cueTimings, type DemoVersion, versionsOf } from "./cue-timings";
export { cues } from "./cues";
export { type LibraryRow, libraries } from "./libraries";
export { type LicenceRow, licences, nextLicenceNumber } from "./licences";
export {
  buyerPeople,
  type CompanyKey,
  type ComposerRow,
  composers,
  libraryPeople,
  marketplacePeople,
  otherUploaders,
  type PersonRow,
  people,
  type RoleRow,
  reporters,
} from "./people";
export { companies, namedRegions, productions } from "./productions";
export { otherTitles, publicDomainTunes, reportedWorks, sharedMaterial } from "./registers";
