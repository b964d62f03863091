import "./session-claim";

export { authOptions } from "./auth-options";
export { type ResolvedViewer, type RoleChoice, resolveViewer } from "./resolve-viewer";
export {
  confirmSecondFactor,
  demonstrationCode,
  pendingSecondFactor,
  requireRecentSecondFactor,
  SecondFactorNeeded,
  setUpDemonstrationFactor,
  startSecondFactor,
} from "./second-factor";
export type { SessionClaim } from "./session-claim";
export { type SignedInPerson, signInWithLink, signInWithPassword } from "./sign-in";
