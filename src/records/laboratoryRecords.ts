import type { Reading } from './reading.ts';
import type { Test, TestInput } from './test.ts';

export interface Photo {
  readonly sha256: string;
  readonly testId: string | null;
  /** Name the laboratory gave the file. */
  readonly fileName: string;
  readonly mediaType: string;
  readonly bytes: number;
  readonly widthPx: number | null;
  readonly heightPx: number | null;
  readonly addedAt: string;
}

export interface ListQuery {
  readonly limit: number;
  readonly cursor?: string;
  readonly text?: string;
  readonly material?: string;
  readonly heat?: string;
}

export type StoreOutcome = 'stored' | 'updated' | 'unchanged';

/** A reading as it is handed to the store. */
export type NewReading = Omit<Reading, 'id' | 'createdAt'>;

/** One row of a test log, ready to be kept. */
export interface LogEntry {
  readonly test: TestInput;
  /** The angle the log states; added unless the test already has the same one (method, result and instrument equal). */
  readonly reading: Omit<NewReading, 'testId'> | null;
}

export interface KeptLogEntry {
  readonly outcome: StoreOutcome;
  readonly testId: string;
  readonly readingAdded: boolean;
}

/**
 * What the laboratory keeps: the port between the domain and the store. Every call is atomic:
 * it happened whole, or not at all.
 */
export interface LaboratoryRecords {
  createTest(input: TestInput): Promise<Test>;
  /** @throws LabError `not-found` */
  readTest(id: string): Promise<Test>;
  /** Replaces the fields of a test; the earlier version stays in history. @throws LabError `changed-meanwhile` */
  changeTest(id: string, expectedVersion: number, input: TestInput): Promise<Test>;
  listTests(query: ListQuery): Promise<{ tests: Test[]; nextCursor: string | null; total: number }>;
  /** Stores by identity (specimen id + test date): new, changed, or nothing to do. */
  upsertTest(input: TestInput): Promise<{ outcome: StoreOutcome; test: Test }>;
  /**
   * `upsertTest` and `addReading` for many rows of a log in one transaction; results in the order given. A field the log
   * leaves empty (null) keeps what is stored. `dryRun`: the same answer, nothing kept.
   */
  upsertLogEntries?(entries: readonly LogEntry[], options?: { readonly dryRun?: boolean }): Promise<KeptLogEntry[]>;
  addReading(reading: Omit<Reading, 'id' | 'createdAt'>): Promise<Reading>;
  readingsOf(testId: string): Promise<Reading[]>;
  addPhoto(photo: Omit<Photo, 'addedAt'>, temporaryPath: string): Promise<Photo>;
  photosOf(testId: string): Promise<Photo[]>;
  /** Path of the stored bytes. @throws LabError `not-found` */
  photoPath(sha256: string): Promise<string>;
  close(): Promise<void>;
}
