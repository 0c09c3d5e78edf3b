import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';

const SegmentTruth = z.object({
  thetaDeg: z.number(),
  share: z.number(),
  /** True for the longitudinal step that closes a helix, where the generator says so. */
  closingStep: z.boolean().optional(),
});

/** The members of NAME.json the bench looks at; photo sets may hold many more. */
export const PhotoTruth = z.object({
  kind: z.enum(['helix', 'transverse', 'oblique-plane', 'longitudinal', 'mixed', 'none']),
  visibleFrontThetaDeg: z.number().nullable(),
  view: z.string().nullish(),
  thetaDeg: z.number().nullish(),
  betaDeg: z.number().nullish(),
  segments: z.array(SegmentTruth).nullish(),
  material: z.string().nullish(),
  background: z.string().nullish(),
  light: z.string().nullish(),
  hollow: z.boolean().nullish(),
  diameterPx: z.number().nullish(),
  lipGapPx: z.object({ median: z.number().nullish() }).nullish(),
});
export type PhotoTruth = z.infer<typeof PhotoTruth>;

export interface PhotoWithTruth {
  readonly file: string;
  readonly path: string;
  readonly truth: PhotoTruth;
}

/** Photos of a folder (sorted by name) that stand beside a NAME.json; other files are passed over. */
export async function readPhotoSet(folder: string): Promise<PhotoWithTruth[]> {
  const names = (await readdir(folder)).sort();
  const present = new Set(names);
  const set: PhotoWithTruth[] = [];
  for (const file of names) {
    const stem = /^(.+)\.(jpe?g|png|webp|tiff?|heic)$/i.exec(file)?.[1];
    if (stem === undefined || !present.has(`${stem}.json`)) continue;
    const text = await readFile(join(folder, `${stem}.json`), 'utf8');
    const parsed = PhotoTruth.safeParse(JSON.parse(text));
    if (!parsed.success) throw new Error(`${stem}.json is not the truth of a photo: ${z.prettifyError(parsed.error)}`);
    set.push({ file, path: join(folder, file), truth: parsed.data });
  }
  return set;
}
