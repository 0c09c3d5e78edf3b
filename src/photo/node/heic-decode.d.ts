declare module 'heic-decode' {
  interface HeicImage {
    readonly width: number;
    readonly height: number;
    decode(): Promise<{ readonly width: number; readonly height: number; readonly data: Uint8ClampedArray }>;
  }
  const heic: { all(input: { readonly buffer: Uint8Array }): Promise<HeicImage[]> };
  export default heic;
}
