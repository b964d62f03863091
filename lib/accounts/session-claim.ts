/** What a session's signed token says. Everything else is read from the database at each request. */
export interface SessionClaim {
  personId: string;
  sessionVersion: number;
  /** When the second factor was last given in this session. */
  secondFactorAt: string | null;
}

declare module "next-auth" {
  interface Session {
    sedgewren?: SessionClaim;
    /** Why a code that was just given was not taken. */
    secondFactorProblem?: string;
  }
  interface User {
    sessionVersion?: number;
  }
}

declare module "next-auth/jwt" {
  interface JWT {
    sedgewren?: SessionClaim;
    /** Milliseconds; the session ends twelve hours later, however often its cookie is written anew. */
    signedInMs?: number;
    secondFactorProblem?: string;
  }
}
