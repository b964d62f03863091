import { drizzle, type MySql2Database } from "drizzle-orm/mysql2";
import mysql from "mysql2/promise";
import { env } from "@/lib/kernel/env";

export type Db = MySql2Database<Record<string, never>>;
/** A transaction: handed out by a verb, never opened elsewhere. */
export type Tx = Parameters<Parameters<Db["transaction"]>[0]>[0];
/** Either: for reads that run inside or outside a transaction. */
export type Reader = Pick<Db, "select" | "selectDistinct" | "execute">;

const STATEMENT_SECONDS = 60;

function open(url: string): mysql.Pool {
  const pool = mysql.createPool({
    uri: url,
    connectionLimit: 12,
    supportBigNumbers: true,
    timezone: "Z",
    charset: "utf8mb4",
    connectTimeout: 5_000,
    enableKeepAlive: true,
  });
  pool.on("connection", (connection) => {
    connection.query(
      `SET SESSION time_zone='+00:00', tx_isolation='READ-COMMITTED', max_statement_time=${STATEMENT_SECONDS}`,
    );
  });
  return pool;
}

const holder = globalThis as { sedgewrenPool?: mysql.Pool; sedgewrenDb?: Db };

/** No relational schema is passed on purpose: relational queries emit LATERAL, which this database refuses. */
export function db(): Db {
  holder.sedgewrenPool ??= open(env.DATABASE_URL);
  holder.sedgewrenDb ??= drizzle(holder.sedgewrenPool);
  return holder.sedgewrenDb;
}

export async function closeDb(): Promise<void> {
  await holder.sedgewrenPool?.end();
  delete holder.sedgewrenPool;
  delete holder.sedgewrenDb;
}
