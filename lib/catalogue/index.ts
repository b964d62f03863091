export {
  endHold,
  listClearRecordings,
  lockFamily,
  openHolds,
  placeHold,
  setFamilyState,
  setHead,
  setRecordingState,
} from "./change-state";
export { contoursOf } from "./contours";
export { countListed } from "./count-listed";
export { createLibrary } from "./create-library";
export { type Availability, type CueCard, type CueVersion, cueCards } from "./cue-card";
export {
  allLibraries,
  familiesByIds,
  familyByCatalogueNumber,
  familyById,
  libraryByCode,
  libraryById,
  recordingById,
  recordingsByIds,
  recordingsBySha256,
  recordingsOfFamily,
  splitAt,
  splitsNow,
} from "./for-rooms";
export { licensedMastersOf, lockLibrary } from "./for-sales";
export { type CuePage, getCue, type LibraryEntry, listLibraries, type ShareLine } from "./get-cue";
export { hearRecording } from "./hear-recording";
export {
  acceptShare,
  type FamilyRegistration,
  insertRecording,
  type NewRecording,
  registerFamily,
  writeSplit,
} from "./register-family";
export { readRecordingToRender, recordMaster, recordPreview } from "./rendering/record-rendering";
export { Brief, type BriefInput, FamilyDescription, Section, Share } from "./schemas";
export { readBrief } from "./search/read-brief";
export { type SearchAnswer, type SearchResult, searchCues } from "./search/search-cues";
export { opensAt } from "./search/weigh";
export { searchTextOf } from "./search-text";
export {
  DEALS,
  FAMILY_STATES,
  type FamilyState,
  RECORDING_STATES,
  type RecordingState,
  WRITER_ROLES,
  type WriterRole,
} from "./states";
