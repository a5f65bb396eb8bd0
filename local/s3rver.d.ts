declare module "s3rver" {
  import type { IncomingMessage, ServerResponse } from "node:http";

  /** The part of s3rver (a Koa application) that we use; it ships no types. */
  export default class S3rver {
    constructor(options: {
      directory: string;
      silent?: boolean;
      vhostBuckets?: boolean;
      configureBuckets?: readonly { name: string }[];
    });
    readonly store: { putBucket(name: string): Promise<unknown> };
    callback(): (request: IncomingMessage, response: ServerResponse) => void;
  }
}
