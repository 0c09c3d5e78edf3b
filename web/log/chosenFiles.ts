/** The files of an import: one log, and the photos named in it (or a zip of them). */
export interface ChosenFiles {
  readonly log: File | null;
  readonly photos: readonly File[];
}

const LOG_NAME = /\.(csv|tsv|txt)$/i;

/** Files dropped together: the first that looks like a log becomes the log, the others photos. */
export function withDropped(before: ChosenFiles, dropped: readonly File[]): ChosenFiles {
  const log = dropped.find(({ name }) => LOG_NAME.test(name)) ?? null;
  const photos = dropped.filter((file) => file !== log);
  return { log: log ?? before.log, photos: photos.length > 0 ? photos : before.photos };
}

export function megabytesText(files: readonly { readonly size: number }[]): string {
  const bytes = files.reduce((sum, { size }) => sum + size, 0);
  return (bytes / 1e6).toFixed(1);
}
