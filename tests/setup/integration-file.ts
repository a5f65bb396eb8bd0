// Runs in every integration test file before its imports: a migrated database of its own, named by the environment,
// so that the application's code reaches it as it always does.
import { afterAll, inject } from "vitest";
import { freshDatabase } from "../helpers/database";

const { variables } = inject("services");
const database = await freshDatabase();
Object.assign(process.env, variables, {
  DATABASE_URL: database.url,
  APP_URL: "http://mainsgate.test",
  NODE_ENV: "test",
});

afterAll(() => database.drop());
