import { bigint, customType, datetime, json } from "drizzle-orm/mysql-core";

/** ASCII text compared byte for byte: ids, hashes, codes. The default collation would fold case. */
export const ascii = (length: number) =>
  customType<{ data: string; driverData: string }>({
    dataType: () => `varchar(${length}) character set ascii collate ascii_bin`,
  });

export const id = customType<{ data: string; driverData: string }>({
  dataType: () => "varchar(40) character set ascii collate ascii_bin",
});

/** drizzle's own binary columns come back as text; these keep their bytes. */
export const bytes = customType<{ data: Buffer; driverData: Buffer }>({
  dataType: () => "mediumblob",
  toDriver: (value) => value,
  fromDriver: (value) => value,
});

export const sha256 = ascii(64);

/** UTC with milliseconds; the session's zone is UTC. */
export const at = (name: string) => datetime(name, { fsp: 3, mode: "date" });

/** Integer amount in the currency's minor unit. */
export const minor = (name: string) => bigint(name, { mode: "bigint" });

export const jsonOf = <T>(name: string) => json(name).$type<T>();
