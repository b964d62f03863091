import type { ErrorCode } from "@/lib/kernel/errors";

export const statusOf: Record<ErrorCode, number> = {
  not_found: 404,
  forbidden: 403,
  unauthenticated: 401,
  invalid: 422,
  conflict: 409,
  limit: 429,
  precondition: 409,
};
