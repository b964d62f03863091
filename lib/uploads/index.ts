export { UploadError, type UploadErrorReason } from "./errors";
export { withLocalCopy } from "./local-copy";
export { streamStored } from "./range-response";
export { removeLeftovers } from "./remove-leftovers";
export { UPLOAD_WINDOW_H, type UploadSlug, uploadLimits, uploadSlugs } from "./states";
export {
  type ByteRange,
  copyToDisk,
  deleteStored,
  readStored,
  type StoredBytes,
  signedReadUrl,
  storeFile,
} from "./stored-files";
export {
  type AnnouncedFile,
  type ArrivedFile,
  makeUploadHandlers,
  makeUploadRouter,
  type UploadGate,
  type UploadGates,
  type UploadRouter,
} from "./upload-router";
export { openUploads, type UploadsClient, type UploadsConfig } from "./uploadthing";
export { webBody } from "./web-body";
