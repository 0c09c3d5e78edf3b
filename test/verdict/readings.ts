import type { PlaneReading, Reading } from '../../src/records/reading.ts';
import { TestInput } from '../../src/records/test.ts';

export const planeReading = (part: Partial<PlaneReading>): PlaneReading => ({
  planeAngleDeg: 45,
  expandedUncertaintyDeg: 2,
  coverageFactor: 2,
  hand: 'left',
  shape: 'helix',
  planeTiltDeg: null,
  segments: [{ planeAngleDeg: part.planeAngleDeg ?? 45, share: 1 }],
  ...part,
});

let made = 0;
export const instrumentReading = (part: Partial<PlaneReading>, record: Partial<Reading> = {}): Reading => ({
  id: `r${++made}`,
  testId: 't1',
  method: 'instrument',
  engineVersion: null,
  photoSha256: null,
  instrument: 'vernier bevel protractor',
  operator: null,
  remarks: null,
  createdAt: '2025-03-01T10:00:00.000Z',
  setAside: false,
  result: { outcome: 'by-instrument', ...planeReading(part) },
  ...record,
});

export const roundBarTest = (part: object = {}): TestInput =>
  TestInput.parse({
    specimenId: 'S-1',
    geometry: { section: 'solid-round', diameterMm: 12 },
    torqueMaxNm: 85,
    torqueDirection: 'ccw',
    ...part,
  });
