import { timestamp } from "drizzle-orm/pg-core";

/** A moment in time, kept to the millisecond that JavaScript can tell. */
export const moment = () => timestamp({ withTimezone: true, precision: 3, mode: "date" });
