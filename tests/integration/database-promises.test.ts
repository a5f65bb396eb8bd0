import mysql from "mysql2/promise";
import { expect, test } from "vitest";
import { appendOnlyTables, applyMigrations } from "../../local/migrations";
import { ownerQuery, ownerUrlOfThisFile } from "../helpers/database";

const asApplication = () => mysql.createConnection({ uri: process.env.DATABASE_URL });

test("the server keeps what a durable, honest database needs switched on", async () => {
  const rows = await ownerQuery(
    ownerUrlOfThisFile(),
    "SHOW VARIABLES WHERE Variable_name IN ('innodb_flush_log_at_trx_commit', 'sync_binlog', 'log_bin', 'innodb_snapshot_isolation', 'tx_isolation', 'time_zone')",
  );
  expect(Object.fromEntries(rows.map((row) => [row.Variable_name, row.Value]))).toEqual({
    innodb_flush_log_at_trx_commit: "1",
    sync_binlog: "1",
    log_bin: "ON",
    innodb_snapshot_isolation: "ON",
    tx_isolation: "REPEATABLE-READ",
    time_zone: "+00:00",
  });
});

test.each(appendOnlyTables)("the application can read and add to %s, and nothing else", async (table) => {
  const connection = await asApplication();
  await expect(connection.query(`SELECT COUNT(*) FROM ${table}`)).resolves.toBeDefined();
  // 1142: "command denied to user for table".
  for (const statement of [
    `UPDATE ${table} SET act = 'x'`,
    `DELETE FROM ${table}`,
    `TRUNCATE ${table}`,
    `DROP TABLE ${table}`,
  ]) {
    await expect(connection.query(statement), statement).rejects.toMatchObject({ errno: 1142 });
  }
  await connection.end();
});

test("of a record the application can change what tells of its PDF, and nothing else", async () => {
  const connection = await asApplication();
  await connection.query("UPDATE records SET pdf_key = pdf_key, pdf_sha256 = pdf_sha256 WHERE id = 0");
  await connection.query("UPDATE records SET pdf_bytes = pdf_bytes, pdf_made_at = pdf_made_at WHERE id = 0");
  const owner = ownerUrlOfThisFile();
  const columns = await ownerQuery(
    owner,
    "SELECT column_name AS name FROM information_schema.columns WHERE table_schema = DATABASE() AND table_name = 'records'",
  );
  const others = columns.map(({ name }) => String(name)).filter((name) => !name.startsWith("pdf_"));
  expect(others).toContain("canonical_json");
  for (const column of others) {
    // 1143: "command denied to user for column".
    await expect(
      connection.query(`UPDATE records SET ${column} = ${column} WHERE id = 0`),
      column,
    ).rejects.toMatchObject({ errno: 1143 });
  }
  for (const statement of ["DELETE FROM records WHERE id = 0", "TRUNCATE records", "DROP TABLE records"]) {
    await expect(connection.query(statement), statement).rejects.toMatchObject({ errno: 1142 });
  }
  await connection.end();
});

test("rights are given anew at every start, without widening", async () => {
  await applyMigrations(process.cwd(), ownerUrlOfThisFile());
  const connection = await asApplication();
  await connection.query("UPDATE records SET pdf_key = pdf_key WHERE id = 0");
  await expect(connection.query("UPDATE records SET sha256 = sha256 WHERE id = 0")).rejects.toMatchObject({
    errno: 1143,
  });
  await expect(connection.query("UPDATE observations SET value = 1 WHERE id = 0")).rejects.toMatchObject({
    errno: 1142,
  });
  await connection.end();
});

test("the application can neither change the schema nor read other databases", async () => {
  const connection = await asApplication();
  await expect(connection.query("CREATE TABLE mine (id INT)")).rejects.toMatchObject({ errno: 1142 });
  await expect(connection.query("SELECT * FROM mysql.user")).rejects.toMatchObject({ errno: 1142 });
  await connection.end();
});

test("of two concurrent changes to one row the second is told, not lost", async () => {
  const owner = ownerUrlOfThisFile();
  await ownerQuery(owner, "CREATE TABLE race (id INT PRIMARY KEY, n INT)");
  await ownerQuery(owner, "INSERT INTO race VALUES (1, 0)");
  const [first, second] = await Promise.all([
    mysql.createConnection({ uri: owner }),
    mysql.createConnection({ uri: owner }),
  ]);
  await first.query("START TRANSACTION WITH CONSISTENT SNAPSHOT");
  await second.query("START TRANSACTION WITH CONSISTENT SNAPSHOT");
  await first.query("UPDATE race SET n = n + 1 WHERE id = 1");
  await first.query("COMMIT");
  // 1020: "Record has changed since last read", the answer under innodb_snapshot_isolation.
  await expect(second.query("UPDATE race SET n = n + 1 WHERE id = 1")).rejects.toMatchObject({ errno: 1020 });
  await Promise.all([first.end(), second.end()]);
});
