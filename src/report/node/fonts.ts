import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';

/** Folder of the embedded fonts: documents never rely on the fonts of a machine. */
export const fontFolder = (): string =>
  join(dirname(createRequire(import.meta.url).resolve('dejavu-fonts-ttf/package.json')), 'ttf');
