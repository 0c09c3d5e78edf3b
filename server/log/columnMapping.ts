import { createHash } from 'node:crypto';
import { LabError } from '../../src/errors.ts';
import { foldHeader, type HandMapping } from '../../src/log/columns.ts';
import { inspectLog } from '../../src/log/node/inspectLog.ts';
import type { LogSource } from '../../src/log/node/logSource.ts';
import { parseOrRefuse } from '../http/requestInvalid.ts';
import { ColumnMapping } from '../http/schemas.ts';
import { withoutUndefined } from '../routes/withoutUndefined.ts';
import type { LaboratoryStore } from '../store/laboratoryStore.ts';

/** Reads columns mapped by hand from the text of a form field; null when there is none. @throws LabError */
export function mappingOf(text: string | undefined): HandMapping[] | null {
  if (text === undefined || text.trim() === '') return null;
  let given: unknown;
  try {
    given = JSON.parse(text);
  } catch {
    throw new LabError('invalid-request', 'mapping must be JSON, got other text', { input: 'mapping', value: text });
  }
  return parseOrRefuse(ColumnMapping, given, 'mapping').map(withoutUndefined);
}

/** Logs with the same headers are the same kind of log. */
async function settingOf(source: LogSource): Promise<string> {
  const { headers } = await inspectLog(source);
  const kind = headers.map(foldHeader).join('\n');
  return `log-columns:${createHash('sha256').update(kind).digest('hex')}`;
}

/** How the laboratory mapped the columns of such a log before; null when it did not. */
export async function rememberedMapping(store: LaboratoryStore, source: LogSource): Promise<HandMapping[] | null> {
  return mappingOf((await store.setting(await settingOf(source))) ?? undefined);
}

/** Remembers a mapping for the next log of this kind. */
export async function rememberMapping(
  store: LaboratoryStore,
  source: LogSource,
  mapping: readonly HandMapping[],
): Promise<void> {
  await store.setSetting(await settingOf(source), JSON.stringify(mapping));
}
