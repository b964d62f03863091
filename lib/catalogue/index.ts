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
export { createLibrary } from "./create-library";
export {
  allLibraries,
  familiesByIds,
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
export {
  acceptShare,
  type FamilyRegistration,
  insertRecording,
  type NewRecording,
  registerFamily,
  writeSplit,
} from "./register-family";
export { FamilyDescription, Section, Share } from "./schemas";
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
