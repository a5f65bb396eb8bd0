import {
  DeleteObjectCommand,
  GetObjectCommand,
  PutObjectCommand,
  S3Client,
  S3ServiceException,
} from "@aws-sdk/client-s3";
import { Upload } from "@aws-sdk/lib-storage";
import { Readable } from "node:stream";
import { environment } from "~/environment.server";
import { NotFoundError, UnavailableError } from "~/services/errors";

/** Where photos, drawings and record PDFs are kept. Keys are ours (random), never made from a person's file name. */
export interface ObjectStore {
  /** Stores a stream of unknown length. @throws UnavailableError when the store doesn't answer; nothing is stored then. */
  putStream(key: string, body: Readable, contentType: string): Promise<void>;
  /** Stores bytes under a key; storing the same key again replaces it. @throws UnavailableError */
  putBytes(key: string, body: Uint8Array, contentType: string): Promise<void>;
  /** Opens an object for reading. @throws NotFoundError, UnavailableError */
  get(key: string): Promise<{ body: Readable; bytes: number | undefined }>;
  /** Removes what was stored for an act that then did not happen; no error if it isn't there. @throws UnavailableError */
  remove(key: string): Promise<void>;
}

/** An {@link ObjectStore} on any service that speaks S3. */
export function s3ObjectStore(client: S3Client, bucket: string): ObjectStore {
  return {
    async putStream(key, body, contentType) {
      const upload = new Upload({
        client,
        params: { Bucket: bucket, Key: key, Body: body, ContentType: contentType },
      });
      await unavailableOnFailure(upload.done());
    },
    async putBytes(key, body, contentType) {
      const command = new PutObjectCommand({
        Bucket: bucket,
        Key: key,
        Body: body,
        ContentType: contentType,
      });
      await unavailableOnFailure(client.send(command));
    },
    async get(key) {
      try {
        const answer = await client.send(new GetObjectCommand({ Bucket: bucket, Key: key }));
        if (!(answer.Body instanceof Readable)) throw new Error("The object store sent no body.");
        return { body: answer.Body, bytes: answer.ContentLength };
      } catch (error) {
        if (error instanceof S3ServiceException && error.name === "NoSuchKey")
          throw new NotFoundError("The file");
        throw new UnavailableError("The file store", { cause: error });
      }
    },
    async remove(key) {
      await unavailableOnFailure(client.send(new DeleteObjectCommand({ Bucket: bucket, Key: key })));
    },
  };
}

async function unavailableOnFailure(work: Promise<unknown>): Promise<void> {
  try {
    await work;
  } catch (error) {
    throw new UnavailableError("The file store", { cause: error });
  }
}

let store: ObjectStore | undefined;

/** The process's object store, made from the environment at its first use. */
export function objectStore(): ObjectStore {
  if (!store) {
    const env = environment();
    const client = new S3Client({
      region: env.S3_REGION,
      endpoint: env.S3_ENDPOINT,
      forcePathStyle: true,
      credentials: { accessKeyId: env.S3_ACCESS_KEY_ID, secretAccessKey: env.S3_SECRET_ACCESS_KEY },
      requestChecksumCalculation: "WHEN_REQUIRED",
      responseChecksumValidation: "WHEN_REQUIRED",
      maxAttempts: 2,
      // Without these a store that is silent, rather than away, would hold requests and the worker for ever.
      requestHandler: { connectionTimeout: 5_000, socketTimeout: 60_000 },
    });
    store = s3ObjectStore(client, env.S3_BUCKET);
  }
  return store;
}
