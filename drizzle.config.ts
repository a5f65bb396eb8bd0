import { defineConfig } from "drizzle-kit";

export default defineConfig({
  dialect: "mysql",
  schema: "./app/db/schema/*.ts",
  casing: "snake_case",
  out: "./drizzle",
});
