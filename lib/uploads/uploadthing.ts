import { UTApi, UTFile } from "uploadthing/server";
import type { Environment } from "@/lib/kernel/env";
import { env } from "@/lib/kernel/env";
import { fetchStreaming } from "./streamed-form";

export type UploadsConfig = Pick<
  Environment,
  | "UPLOADTHING_TOKEN"
  | "UPLOADTHING_INGEST_URL"
  | "UPLOADTHING_API_URL"
  | "UPLOADTHING_CALLBACK_URL"
  | "UPLOADTHING_UFS_HOST"
  | "UPLOADTHING_UFS_APP_ID_LOCATION"
  | "UPLOADTHING_LOG_LEVEL"
  | "UPLOADTHING_IS_DEV"
>;

/** An open door to the file store; what is behind it stays in this room. */
export interface UploadsClient {
  readonly config: UploadsConfig;
  readonly api: UTApi;
}

type LogLevel = NonNullable<NonNullable<ConstructorParameters<typeof UTApi>[0]>["logLevel"]>;

/** Level "Info" would print signed addresses. */
export function logLevelOf(config: UploadsConfig): LogLevel {
  return config.UPLOADTHING_LOG_LEVEL as LogLevel;
}

export function openUploads(config: UploadsConfig): UploadsClient {
  const api = new UTApi({
    token: config.UPLOADTHING_TOKEN,
    fetch: fetchStreaming,
    logLevel: logLevelOf(config),
    logFormat: "json",
    ufsAppIdLocation: config.UPLOADTHING_UFS_APP_ID_LOCATION,
    ...(config.UPLOADTHING_API_URL ? { apiUrl: config.UPLOADTHING_API_URL } : {}),
    ...(config.UPLOADTHING_INGEST_URL ? { ingestUrl: config.UPLOADTHING_INGEST_URL } : {}),
    ...(config.UPLOADTHING_UFS_HOST ? { ufsHost: config.UPLOADTHING_UFS_HOST } : {}),
  });
  return { config, api };
}

let opened: UploadsClient | undefined;

/** The door that the environment names. */
export function uploadsClient(): UploadsClient {
  opened ??= openUploads(env);
  return opened;
}

export { UTFile };
