import { z } from 'zod';

/** The first file of a backup: what it holds, with a checksum each. */
export const MANIFEST = 'breakplane-backup.json';
export const DATABASE = 'laboratory.sqlite';

export const BackupManifest = z.object({
  format: z.literal('breakplane-backup-1'),
  madeAt: z.string(),
  programVersion: z.string(),
  files: z.array(
    z.object({
      path: z
        .string()
        .regex(
          /^(?:laboratory\.sqlite|photos\/([0-9a-f]{2})\/([0-9a-f]{2})\/\1\2[0-9a-f]{60}|imports\/[0-9a-f-]{36}-refused\.csv)$/,
        ),
      bytes: z.number().int().nonnegative(),
      sha256: z.string().regex(/^[0-9a-f]{64}$/),
    }),
  ),
});
export type BackupManifest = z.infer<typeof BackupManifest>;
