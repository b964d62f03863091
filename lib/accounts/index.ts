import "./session-claim";

export {
  type DemonstrationSignIn,
  demonstrationSignIns,
  getAccount,
  listInvitations,
  listPeople,
  listSeats,
  type OpenInvitationEntry,
  type OwnAccount,
  type PersonEntry,
} from "./account-reads";
export { type AuditLine, auditList } from "./audit-list";
export { authOptions } from "./auth-options";
export { registerCompany } from "./companies";
export {
  acceptInvitation,
  getInvitation,
  invitePerson,
  type OpenInvitation,
  withdrawInvitation,
} from "./invitations";
export { chooseRole, endMembership, grantMembership } from "./memberships";
export { disablePerson, enablePerson, registerPerson, resetSecondFactor } from "./people";
export {
  type Company,
  type ConfirmedName,
  companiesByIds,
  companyById,
  confirmedName,
  confirmedNamesOf,
  holdsRole,
  type PersonRef,
  peopleByIds,
  peopleWithRole,
  personName,
  type Seat,
  seatsOf,
  type WriterRef,
  writerOnRoster,
} from "./reads";
export { getSignInLink, requestSignInLink } from "./request-sign-in-link";
export { type ResolvedViewer, type RoleChoice, resolveViewer } from "./resolve-viewer";
export { confirmName, findWriter, listRoster, type RosterMember, type RosterWriter } from "./roster";
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
export { setPassword, signOutEverywhere } from "./set-password";
export { type SignedInPerson, signInWithLink, signInWithPassword } from "./sign-in";
export { DEMO_PASSWORD, type Role } from "./states";
