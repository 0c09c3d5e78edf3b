import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

/** Where a part of the program lies that is loaded by its file: built beside this module, or as TypeScript source. */
export interface ProgramPart {
  readonly url: URL;
  /** What a worker needs to run it. */
  readonly execArgv: readonly string[];
}

/**
 * @param built name in dist/server
 * @param source path of the source, relative to server/
 */
export function programPart(built: string, source: string): ProgramPart | null {
  for (const url of [new URL(`./${built}`, import.meta.url), new URL(`./${source}`, import.meta.url)]) {
    if (existsSync(fileURLToPath(url)))
      return { url, execArgv: url.pathname.endsWith('.ts') ? ['--import', 'tsx'] : [] };
  }
  return null;
}
