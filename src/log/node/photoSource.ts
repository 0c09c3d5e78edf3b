import { LabError } from '../../errors.ts';

/** A photo of a folder or an archive; its name is only ever compared, never used as a path to write to. */
export interface PhotoFile {
  /** Name without folders. */
  readonly fileName: string;
  /** Name with the folders inside the folder or archive, parted by "/". */
  readonly innerPath: string;
  readonly bytes: number;
  /** Writes the bytes to a new file. @throws LabError `too-large` for more bytes than stated or allowed */
  copyTo(path: string): Promise<void>;
}

export interface PhotoSource {
  readonly files: readonly PhotoFile[];
  /** Entries left out, with the reason. */
  readonly refused: readonly { readonly name: string; readonly message: string }[];
  close(): void;
}

/** No photo of a specimen is larger. */
export const LARGEST_PHOTO_BYTES = 200 * 1024 * 1024;
/** Entries beyond this are not looked at. */
export const MOST_PHOTOS = 100_000;

/** Files that are there for the computer, not for the laboratory. */
export const isHidden = (name: string): boolean => name.startsWith('.') || name === '__MACOSX' || name === 'Thumbs.db';

/** The refusal of a photo that is larger than any photo of a specimen. */
export const tooLarge = (name: string, bytes: number): LabError =>
  new LabError('too-large', `photo must have at most ${LARGEST_PHOTO_BYTES} bytes, got ${bytes} for "${name}"`, {
    input: 'photo',
    value: name,
  });

export const notPhotos = (name: string, why: string): LabError =>
  new LabError('invalid-request', `photos must be a folder or a zip archive, got "${name}": ${why}`, {
    input: 'photos',
    value: name,
  });
