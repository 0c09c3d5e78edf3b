import { existsSync } from 'node:fs';
import { join } from 'node:path';
import fastifyStatic from '@fastify/static';
import type { FastifyInstance } from 'fastify';

/** Names with a hash of their content never change. */
const isHashed = (path: string): boolean => /[/\\]assets[/\\].+-[\w-]{8}\.\w+$/.test(path);

/** What becomes of a path that no file has. */
export type PlaceOfPage = 'page' | 'not-built' | 'none';

/**
 * Serves the built page.
 * @returns whether a path that no file has is a place of the page, shown by index.html
 */
export async function servePage(app: FastifyInstance, programDir: string): Promise<(path: string) => PlaceOfPage> {
  const root = join(programDir, 'dist', 'web');
  const built = existsSync(join(root, 'index.html'));
  if (built) {
    await app.register(fastifyStatic, {
      root,
      index: 'index.html',
      dotfiles: 'deny',
      cacheControl: false,
      setHeaders: (response, path) => {
        response.header('cache-control', isHashed(path) ? 'public, max-age=31536000, immutable' : 'no-cache');
      },
    });
  }
  return (path) => {
    if (path === '/api' || path.startsWith('/api/') || /\.\w+$/.test(path)) return 'none';
    return built ? 'page' : 'not-built';
  };
}
