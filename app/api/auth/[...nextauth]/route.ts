import NextAuth from "next-auth";
import { authOptions } from "@/lib/accounts";

/** next-auth's own door: it checks its own CSRF token, so it stands outside the wrapper for routes. */
const handler = NextAuth(authOptions);

export { handler as GET, handler as POST };
