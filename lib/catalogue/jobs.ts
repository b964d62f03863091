import { defineHandlers } from "@/lib/jobs";
import { renderLicensedMaster, renderRecordingPreview } from "./rendering/render-recording";

const TIMEOUT_S = 3700;

export const catalogueHandlers = defineHandlers({
  "catalogue.renderPreview": {
    heavy: true,
    timeoutS: TIMEOUT_S,
    handle: ({ recordingId }) => renderRecordingPreview(recordingId),
  },
  "catalogue.renderMaster": {
    heavy: true,
    timeoutS: TIMEOUT_S,
    handle: ({ recordingId }) => renderLicensedMaster(recordingId),
  },
});
