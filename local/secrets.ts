import { randomBytes } from "node:crypto";
import { existsSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { z } from "zod";

const secretsSchema = z.object({
  databaseRoot: z.string().min(20),
  databaseOwner: z.string().min(20),
  databaseApp: z.string().min(20),
  s3AccessKeyId: z.string().min(10),
  s3SecretAccessKey: z.string().min(20),
  session: z.string().min(32),
});
/** Passwords of one data folder, generated once and kept in it, readable by its owner alone. */
export type Secrets = z.infer<typeof secretsSchema>;

/** Reads the folder's secrets, making them at the first start. */
export function keepSecrets(folder: string): Secrets {
  const file = join(folder, "secrets.json");
  if (!existsSync(file)) {
    const make = () => randomBytes(24).toString("base64url");
    const secrets: Secrets = {
      databaseRoot: make(),
      databaseOwner: make(),
      databaseApp: make(),
      s3AccessKeyId: `local${randomBytes(8).toString("hex")}`,
      s3SecretAccessKey: make(),
      session: randomBytes(32).toString("base64url"),
    };
    writeFileSync(file, `${JSON.stringify(secrets, null, 2)}\n`, { mode: 0o600, flag: "wx" });
  }
  return secretsSchema.parse(JSON.parse(readFileSync(file, "utf8")));
}
