import type { Photo } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { Test } from '../../src/records/test.ts';
import { assessTest } from '../../src/verdict/assessTest.ts';
import type { Assessment } from '../../src/verdict/model.ts';
import type { LaboratoryStore } from '../store/laboratoryStore.ts';

/** Everything the service says about one test. */
export interface Sheet {
  readonly test: Test;
  readonly photos: readonly Photo[];
  readonly readings: readonly Reading[];
  readonly assessment: Assessment;
}

/** @throws LabError `not-found` */
export async function sheetOf(store: LaboratoryStore, testId: string): Promise<Sheet> {
  const dossier = await store.readDossier(testId);
  return { ...dossier, assessment: assessTest(dossier.test, dossier.readings) };
}

export async function sheetWithoutTest(store: LaboratoryStore, testId: string): Promise<Omit<Sheet, 'test'>> {
  const { test: _, ...rest } = await sheetOf(store, testId);
  return rest;
}
