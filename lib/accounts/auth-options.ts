import type { NextAuthOptions } from "next-auth";
import type { CredentialsConfig } from "next-auth/providers/credentials";
import { systemNow } from "@/lib/kernel/clock";
import { Expected } from "@/lib/kernel/errors";
import { log } from "@/lib/kernel/log";
import { confirmSecondFactor } from "./second-factor";
import type { SessionClaim } from "./session-claim";
import { type SignedInPerson, signInWithLink, signInWithPassword } from "./sign-in";

const SESSION_S = 12 * 3600;

type Credentials = Record<string, unknown> | undefined;
type SignInRequest = { headers?: Record<string, unknown> } | undefined;

const text = (credentials: Credentials, name: string): string => {
  const value = credentials?.[name];
  return typeof value === "string" ? value : "";
};

/** The address a request came from, for limits only; the last entry is the one our own proxy wrote. */
function addressOf(request: SignInRequest): string {
  const forwarded = request?.headers?.["x-forwarded-for"];
  return (typeof forwarded === "string" ? forwarded.split(",").at(-1)?.trim() : null) || "local";
}

const userOf = (person: SignedInPerson) => ({ id: person.personId, sessionVersion: person.sessionVersion });

/** next-auth hands the message of a thrown error to the form; only what may be shown gets there. */
function shown(error: unknown): Error {
  if (error instanceof Expected) return new Error(error.message);
  log.error({ error: error instanceof Error ? error.stack : String(error) }, "sign-in failed");
  return new Error("Something went wrong on our side. You are not signed in; please try again.");
}

// Written out instead of made by next-auth's own function, whose CommonJS form differs between the site and the worker.
const byPassword: CredentialsConfig = {
  id: "password",
  name: "Password",
  type: "credentials",
  credentials: {},
  authorize: async (credentials: Credentials, request: SignInRequest) => {
    try {
      const person = await signInWithPassword({
        email: text(credentials, "email"),
        password: text(credentials, "password"),
        address: addressOf(request),
      });
      return person ? userOf(person) : null;
    } catch (error) {
      throw shown(error);
    }
  },
};

const byLink: CredentialsConfig = {
  id: "link",
  name: "Link by mail",
  type: "credentials",
  credentials: {},
  authorize: async (credentials: Credentials) => {
    try {
      const name = text(credentials, "name");
      return userOf(await signInWithLink({ token: text(credentials, "token"), name: name || undefined }));
    } catch (error) {
      throw shown(error);
    }
  },
};

async function withCode(
  claim: SessionClaim,
  update: unknown,
): Promise<{ claim: SessionClaim; problem?: string }> {
  const given = update as { secondFactorCode?: unknown } | null;
  if (typeof given?.secondFactorCode !== "string") return { claim };
  try {
    const { at } = await confirmSecondFactor({
      personId: claim.personId,
      sessionVersion: claim.sessionVersion,
      code: given.secondFactorCode.slice(0, 12),
      // A session's update does not say where it comes from; codes take turns by account anyway.
      address: claim.personId,
    });
    return { claim: { ...claim, secondFactorAt: at } };
  } catch (error) {
    return { claim, problem: shown(error).message };
  }
}

export const authOptions: NextAuthOptions = {
  session: { strategy: "jwt", maxAge: SESSION_S },
  pages: { signIn: "/sign-in", error: "/sign-in" },
  providers: [byPassword, byLink],
  callbacks: {
    jwt: async ({ token, user, trigger, session }) => {
      delete token.secondFactorProblem;
      if (user?.sessionVersion !== undefined) {
        token.sedgewren = { personId: user.id, sessionVersion: user.sessionVersion, secondFactorAt: null };
        token.signedInMs = systemNow().getTime();
      } else if (trigger === "update" && token.sedgewren) {
        const { claim, problem } = await withCode(token.sedgewren, session);
        token.sedgewren = claim;
        if (problem) token.secondFactorProblem = problem;
      }
      return token;
    },
    session: ({ session, token }) => {
      const ageS = (systemNow().getTime() - (token.signedInMs ?? 0)) / 1000;
      if (token.sedgewren && ageS < SESSION_S) session.sedgewren = token.sedgewren;
      if (token.secondFactorProblem) session.secondFactorProblem = token.secondFactorProblem;
      return session;
    },
  },
};
