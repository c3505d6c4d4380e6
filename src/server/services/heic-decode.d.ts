declare module 'heic-decode' {
  interface Decoded {
    readonly width: number;
    readonly height: number;
    /** RGBA, upright: the file's own rotation is applied. */
    readonly data: Uint8ClampedArray;
  }
  interface Found {
    readonly width: number;
    readonly height: number;
    decode(): Promise<Decoded>;
  }
  interface Decode {
    (options: { buffer: Uint8Array }): Promise<Decoded>;
    /** The pictures of a file, sizes first, so that one too large is never decoded. */
    all(options: { buffer: Uint8Array }): Promise<readonly Found[] & { dispose(): void }>;
  }
  const decode: Decode;
  export default decode;
}
