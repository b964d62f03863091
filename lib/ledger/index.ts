export { type Capture, type CapturedLine, postCapture } from "./capture";
export {
  type DisputeOfPayment,
  type PostedDispute,
  postDispute,
  postDisputeWon,
  type WonDispute,
} from "./dispute";
export { type EntryToPost, type LineRef, type PostedEntry, postEntry } from "./post-entry";
export { postRefund, type RefundOfLines } from "./refund";
