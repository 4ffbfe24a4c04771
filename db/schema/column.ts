import { sql } from "drizzle-orm";
import { customType, timestamp, uuid } from "drizzle-orm/pg-core";

/** Random primary key made by the database. */
export const idColumn = () => uuid("id").primaryKey().default(sql`gen_random_uuid()`);
/** Instants are kept to the millisecond, so that a page cursor made from one never loses digits. */
export const instant = (name: string) => timestamp(name, { withTimezone: true, precision: 3, mode: "date" });
/** The database clock, never the caller's. */
export const createdAt = () => instant("created_at").notNull().defaultNow();
/** A whole number as a JavaScript number: sizes and sequence numbers stay far below 2^53. */
export const wholeNumber = customType<{ data: number; driverData: string }>({
  dataType: () => "bigint",
  fromDriver: Number,
});
