import { createWriteStream, type WriteStream } from 'node:fs';
import { rename, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { finished } from 'node:stream/promises';
import type { ImportSummary } from '../../src/log/importSummary.ts';
import { type ImportLog, importLog } from '../../src/log/node/importLog.ts';
import type { LogSource } from '../../src/log/node/logSource.ts';
import type { PhotoSource } from '../../src/log/node/photoSource.ts';
import type { LogDeclarations } from '../../src/log/node/planImport.ts';
import { refusedRowLine, refusedRowsHeader } from '../../src/log/refusedRows.ts';
import type { Service } from '../service.ts';
import { orderedId } from '../store/orderedId.ts';
import { noteOnUnnamed, watchPhotos } from './unnamedPhotos.ts';

export interface ImportRequest {
  readonly source: LogSource;
  readonly photos: PhotoSource | null;
  readonly dryRun: boolean;
  readonly declared?: LogDeclarations;
  readonly signal?: AbortSignal;
}

/** The summary, with the id under which the refused rows are found. */
export type ImportAnswer = ImportSummary & { readonly id: string };

/** Where the refused rows of an import lie. */
export const refusedRowsPath = (service: Service, id: string): string =>
  join(service.store.folder.imports, `${id}-refused.csv`);

/** Writes refused rows as they come: header once, then one line a row, never all of them in memory. */
function refusedRowsWriter(path: string) {
  let stream: WriteStream | null = null;
  return {
    add(row: Parameters<NonNullable<ImportLog['onRefused']>>[0], log: { rawHeader: string; delimiter: string }): void {
      if (!stream) {
        stream = createWriteStream(path, { flags: 'wx' });
        // A byte-order mark makes spreadsheets read UTF-8.
        stream.write(`\uFEFF${refusedRowsHeader(log.rawHeader, log.delimiter)}\r\n`);
      }
      stream.write(`${refusedRowLine(row, log.delimiter)}\r\n`);
    },
    /** @returns whether there is a file */
    async end(): Promise<boolean> {
      if (!stream) return false;
      stream.end();
      await finished(stream);
      return true;
    },
  };
}

/** Imports a log as the command line does; photos are kept at once and measured in the background. */
export async function runImport(service: Service, request: ImportRequest): Promise<ImportAnswer> {
  const { store, measuring } = service;
  const id = orderedId();
  const startedAt = new Date().toISOString();
  const pending = join(store.folder.incoming, `${id}-refused.csv`);
  const refused = refusedRowsWriter(pending);
  const watched = request.photos && watchPhotos(request.photos);
  try {
    const imported = await importLog({
      source: request.source,
      photos: watched?.source ?? null,
      records: store,
      pool: null,
      dryRun: request.dryRun,
      ...(request.declared && { declared: request.declared }),
      ...(request.signal && { signal: request.signal }),
      onRefused: refused.add,
      onPhotoKept: () => measuring.wake(),
      temporaryDir: store.folder.incoming,
    });
    const note = watched && !request.dryRun ? noteOnUnnamed(watched.unnamed()) : null;
    const summary = note === null ? imported : { ...imported, notes: [...imported.notes, note] };
    if (await refused.end()) await rename(pending, refusedRowsPath(service, id));
    await store.keepImport({
      id,
      fileName: request.source.name,
      dryRun: request.dryRun,
      startedAt,
      endedAt: new Date().toISOString(),
      summary: JSON.stringify(summary),
    });
    return { ...summary, id };
  } finally {
    await refused.end().catch(() => false);
    await rm(pending, { force: true });
  }
}
