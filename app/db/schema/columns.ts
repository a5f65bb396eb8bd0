import { customType, datetime, int } from "drizzle-orm/mysql-core";

/** A surrogate key. */
export const id = () => int({ unsigned: true }).autoincrement().primaryKey();

/** A reference to a surrogate key; the caller adds `.references()`. */
export const ref = () => int({ unsigned: true });

/** The key of a check, compared sign by sign: F1 and f1 are two elements. */
export const checkKeyColumn = customType<{ data: string }>({
  dataType: () => "varchar(190) character set utf8mb4 collate utf8mb4_bin",
});

/** A moment in UTC with milliseconds. */
export const moment = () => datetime({ mode: "date", fsp: 3 });
