import { COLUMNS, type Rows } from "../columns";

export const rows = { "health.readHealth": { input: async () => ({}), may: COLUMNS } } satisfies Rows;
