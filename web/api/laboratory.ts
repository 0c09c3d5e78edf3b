import type { Test, TestInput } from '../../src/records/test.ts';
import { type OnSent, request, sendForm } from './http.ts';
import type { Laboratory, LogImport, ReadingAdded, SheetWithoutTest, TestPage, TestSheet } from './types.ts';

const part = encodeURIComponent;

/** How many tests there are, and whether the demo laboratory can be loaded. */
export const readLaboratory = (signal?: AbortSignal) => request<Laboratory>('/laboratory', signal ? { signal } : {});

export const loadDemoLaboratory = () => request<unknown>('/demo-laboratory', { method: 'POST', json: {} });

export interface TestQuery {
  readonly text: string;
  readonly cursor?: string;
  readonly limit: number;
}

/** One page of the list of tests. */
export function listTests({ text, cursor, limit }: TestQuery, signal?: AbortSignal): Promise<TestPage> {
  const query = new URLSearchParams({ limit: String(limit) });
  if (text.trim() !== '') query.set('text', text.trim());
  if (cursor !== undefined) query.set('cursor', cursor);
  return request<TestPage>(`/tests?${query}`, signal ? { signal } : {});
}

export const readSheet = (testId: string, signal?: AbortSignal) =>
  request<TestSheet>(`/tests/${part(testId)}`, signal ? { signal } : {});

export const createTest = (input: TestInput) => request<Test>('/tests', { method: 'POST', json: input });

/** Changes a test; refused with `changed-meanwhile` when `version` is no longer the newest. */
export const changeTest = (testId: string, version: number, input: TestInput) =>
  request<Test>(`/tests/${part(testId)}`, { method: 'PUT', json: input, headers: { 'if-match': `"${version}"` } });

/** Sends photos of a test; answers when they are measured. */
export function sendPhotos(testId: string, photos: readonly File[], onSent?: OnSent): Promise<SheetWithoutTest> {
  const form = new FormData();
  for (const photo of photos) form.append('photo', photo, photo.name);
  return sendForm<SheetWithoutTest>(`/tests/${part(testId)}/photos`, form, onSent);
}

/** Measures a stored photo again, with the engine of today. */
export const measureAgain = (testId: string, sha256: string) =>
  request<SheetWithoutTest>(`/tests/${part(testId)}/photos/${part(sha256)}/measurements`, { method: 'POST', json: {} });

/** A reading made by a person: with an instrument, or by dragging the trace on a photo. */
export type HandReading =
  | {
      readonly method: 'instrument';
      readonly planeAngleDeg: number;
      readonly expandedUncertaintyDeg: number;
      readonly instrument: string;
      readonly operator?: string;
      readonly remarks?: string;
    }
  | {
      readonly method: 'photo-hand';
      readonly photoSha256: string;
      readonly axisPx: readonly [readonly [number, number], readonly [number, number]];
      readonly diameterPx: number;
      readonly tracePx: readonly (readonly [number, number])[];
      readonly operator?: string;
      readonly remarks?: string;
    };

export const addReading = (testId: string, reading: HandReading) =>
  request<ReadingAdded>(`/tests/${part(testId)}/readings`, { method: 'POST', json: reading });

export const setReadingAside = (readingId: string, setAside: boolean, why: string) =>
  request<unknown>(`/readings/${part(readingId)}/set-aside`, { method: 'POST', json: { setAside, why } });

/** Sends a log with its photos; a dry run stores nothing. */
export function importLog(log: File, photos: readonly File[], dryRun: boolean, onSent?: OnSent): Promise<LogImport> {
  const form = new FormData();
  form.append('log', log, log.name);
  for (const photo of photos) form.append('photo', photo, photo.name);
  return sendForm<LogImport>(`/logs?dryRun=${dryRun}`, form, onSent);
}

/** Address of the upright photo, at most `widthPx` wide. */
export const uprightPhotoAddress = (sha256: string, widthPx: number): string =>
  `/api/v1/photos/${part(sha256)}/upright.jpg?width=${widthPx}`;

export const reportAddress = (testId: string): string => `/api/v1/tests/${part(testId)}/report.pdf`;

export const refusedRowsAddress = (importId: string): string => `/api/v1/logs/${part(importId)}/refused.csv`;
