"use server";

import { navFor } from "@/components/shell/nav";
import {
  acceptInvitation,
  chooseRole as chooseRoleVerb,
  confirmName,
  disablePerson,
  enablePerson,
  endMembership,
  invitePerson,
  registerCompany,
  requestSignInLink,
  resetSecondFactor,
  setPassword,
  signOutEverywhere,
  startSecondFactor,
  withdrawInvitation,
} from "@/lib/accounts";
import { action, clientAddress, roleCookieName } from "@/lib/web";

const THIRTY_DAYS_S = 30 * 86_400;

export const chooseRole = action(chooseRoleVerb, {
  cookie: ({ data }) => ({ name: roleCookieName, value: data.membershipId, maxAgeS: THIRTY_DAYS_S }),
  redirectTo: ({ data }) => navFor(data.kind, data.isMarketplace)[0]?.href ?? "/",
});

export const askForLink = action(requestSignInLink, {
  adds: async () => ({ address: await clientAddress() }),
});

export const acceptAnInvitation = action(acceptInvitation);
export const changePassword = action(setPassword);
export const endAllSessions = action(signOutEverywhere);
export const beginSecondFactor = action(startSecondFactor, { refresh: () => ["/account"] });

export const inviteSomebody = action(invitePerson, { refresh: () => ["/roster", "/company", "/people"] });
export const takeInvitationBack = action(withdrawInvitation, {
  refresh: () => ["/roster", "/company", "/people"],
});
export const endRole = action(endMembership, {
  refresh: () => ["/roster", "/company", "/people", "/account"],
});
export const confirmWriter = action(confirmName, { refresh: () => ["/roster"] });
export const addCompany = action(registerCompany, { refresh: () => ["/account", "/company"] });

export const disableAccount = action(disablePerson, { refresh: () => ["/people"] });
export const enableAccount = action(enablePerson, { refresh: () => ["/people"] });
export const resetFactor = action(resetSecondFactor, { refresh: () => ["/people"] });
