import type { Photo } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { Test } from '../../src/records/test.ts';
import type { Assessment, FailureMode } from '../../src/verdict/model.ts';

/** What the service answers, beyond the records themselves. */
export interface Laboratory {
  readonly tests: number;
  readonly demoAvailable: boolean;
  readonly engineVersion: string;
  readonly programVersion: string;
}

/** A test in the list, with what its readings say. */
export type TestRow = Test & {
  readonly mode: FailureMode | null;
  readonly probability: number | null;
  readonly planeAngleDeg: number | null;
  readonly expandedUncertaintyDeg: number | null;
  readonly photoCount: number;
  readonly readingCount: number;
  readonly flags: readonly Flag[];
};

/** Something odd about a test that a person should look at. */
export interface Flag {
  readonly code: string;
  readonly sentence: string;
}

export interface TestPage {
  readonly tests: readonly TestRow[];
  readonly nextCursor: string | null;
  readonly total: number;
}

/** Everything the service knows about one test. */
export interface TestSheet {
  readonly test: Test;
  readonly photos: readonly Photo[];
  readonly readings: readonly Reading[];
  readonly assessment: Assessment;
}

export type SheetWithoutTest = Omit<TestSheet, 'test'>;

export interface ReadingAdded {
  readonly reading: Reading;
  readonly assessment: Assessment;
}

/** A row of a log that was not taken over, with the reason. */
export interface Refusal {
  readonly line: number;
  readonly column: string | null;
  readonly value: string | null;
  readonly code: string;
  readonly message: string;
}

export interface LogImport {
  readonly id?: string;
  readonly rows: number;
  readonly stored: number;
  readonly updated: number;
  readonly unchanged: number;
  readonly refused: number;
  readonly refusals: readonly Refusal[];
  readonly photosQueued: number;
  readonly photosMeasured: number;
  /** Photos that rows name and that could not be kept. */
  readonly photoProblems: readonly {
    readonly line: number;
    readonly specimenId: string;
    readonly photo: string;
    readonly message: string;
  }[];
  /** What was assumed or left out. */
  readonly notes: readonly string[];
}
