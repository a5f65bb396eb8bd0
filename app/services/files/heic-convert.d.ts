declare module "heic-convert" {
  interface Options {
    buffer: Uint8Array;
    format: "JPEG" | "PNG";
    /** 0 to 1, for JPEG. */
    quality?: number;
  }
  export default function convert(options: Options): Promise<ArrayBuffer | Uint8Array>;
}
