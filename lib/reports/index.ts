export { admitConfidential, confidentialArrived, confirmReporterAddress } from "./confirm-address";
export { judgeNotice, takeNotice } from "./judge-notice";
export {
  getNoticeStatus,
  getReport,
  hearReported,
  listReports,
  type NoticeStatus,
  type ReportList,
  type ReportView,
} from "./reads";
export { addReportedWork, recordFingerprinted, setEvidenceLevel } from "./reported-works";
export { JudgeNotice, SetEvidenceLevel, SubmitNotice, type SubmitNoticeInput } from "./schemas";
export { EVIDENCE_LEVELS, type EvidenceLevel, GROUNDS } from "./states";
export { submitNotice } from "./submit-notice";
