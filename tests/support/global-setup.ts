import { existsSync, readFileSync } from "node:fs";
import mysql from "mysql2/promise";

/** After the run: drops the databases that its processes made. */
export default function setup() {
  return async () => {
    const file = new URL("../../.data/test/env", import.meta.url);
    const url =
      process.env.TEST_DATABASE_ADMIN_URL ??
      (existsSync(file)
        ? readFileSync(file, "utf8").match(/^TEST_DATABASE_ADMIN_URL=(.+)$/m)?.[1]
        : undefined);
    if (!url) return;
    const admin = await mysql.createConnection({ uri: url }).catch(() => null);
    if (!admin) return;
    const [rows] = await admin.query<mysql.RowDataPacket[]>(
      "select schema_name as name from information_schema.schemata where schema_name like ?",
      [`sedgewren\\_test\\_${process.pid}\\_%`],
    );
    for (const row of rows) await admin.query(`drop database if exists \`${row.name}\``);
    await admin.end();
  };
}
