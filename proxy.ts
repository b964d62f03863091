import { randomBytes, randomUUID } from "node:crypto";
import { type NextRequest, NextResponse } from "next/server";
import { contentSecurityPolicy } from "@/lib/web/content-security-policy";

/** Gives each request its nonce and id. It decides nothing about access. */
export function proxy(request: NextRequest): NextResponse {
  const nonce = randomBytes(16).toString("base64");
  const ingest = process.env.UPLOADTHING_INGEST_URL;
  const policy = contentSecurityPolicy(nonce, {
    uploadOrigin: ingest ? new URL(ingest).origin : "https://*.ingest.uploadthing.com",
    dev: process.env.NODE_ENV === "development",
  });
  const headers = new Headers(request.headers);
  headers.set("x-nonce", nonce);
  headers.set("x-request-id", randomUUID());
  headers.set("x-path", request.nextUrl.pathname);
  headers.set("content-security-policy", policy);
  const response = NextResponse.next({ request: { headers } });
  response.headers.set("content-security-policy", policy);
  response.headers.set("x-content-type-options", "nosniff");
  response.headers.set("referrer-policy", "same-origin");
  response.headers.set("permissions-policy", "camera=(), microphone=(), geolocation=()");
  return response;
}

export const config = { matcher: ["/((?!_next/static|_next/image|favicon.ico|fonts/).*)"] };
