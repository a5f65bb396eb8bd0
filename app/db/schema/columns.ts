import { datetime, int } from "drizzle-orm/mysql-core";

/** A surrogate key. */
export const id = () => int({ unsigned: true }).autoincrement().primaryKey();

/** A reference to a surrogate key; the caller adds `.references()`. */
export const ref = () => int({ unsigned: true });

/** A moment in UTC with milliseconds. */
export const moment = () => datetime({ mode: "date", fsp: 3 });
