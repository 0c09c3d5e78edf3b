import type { Photo } from '../../src/records/laboratoryRecords.ts';
import type { Reading } from '../../src/records/reading.ts';
import type { Test, TestInput } from '../../src/records/test.ts';
import type { PhotoTable, ReadingTable, TestRecord } from './schema.ts';

/** Fields that came later: left out where empty, so that the text of earlier tests stays as it was. */
function furtherFields(input: TestInput): Partial<TestInput> {
  const { bendingAzimuthDeg, internalPressureMPa, breakLocation, torsionHistory } = input;
  return {
    ...(bendingAzimuthDeg != null && { bendingAzimuthDeg }),
    ...(internalPressureMPa != null && { internalPressureMPa }),
    ...(breakLocation != null && { breakLocation }),
    ...(torsionHistory != null && { torsionHistory }),
  };
}

/** The fields of a test, in one fixed order, so that equal tests have equal text. */
export function fieldsOf(input: TestInput): TestInput {
  const { geometry } = input;
  return {
    specimenId: input.specimenId,
    testDate: input.testDate,
    material: input.material,
    heat: input.heat,
    geometry:
      geometry.section === 'hollow-round'
        ? { section: geometry.section, diameterMm: geometry.diameterMm, boreMm: geometry.boreMm }
        : geometry.section === 'solid-round'
          ? { section: geometry.section, diameterMm: geometry.diameterMm }
          : geometry,
    gaugeLengthMm: input.gaugeLengthMm,
    torqueMaxNm: input.torqueMaxNm,
    torqueDirection: input.torqueDirection,
    twistFractureDeg: input.twistFractureDeg,
    axialForceN: input.axialForceN,
    bendingMomentNm: input.bendingMomentNm,
    ...furtherFields(input),
    operator: input.operator,
    remarks: input.remarks,
  };
}

/** Text as it is compared and searched: one form of every letter, small. */
export const foldText = (text: string): string => text.normalize('NFKC').toLowerCase().trim();

const foldOrNull = (text: string | null): string | null => (text === null ? null : foldText(text));

/** Specimen id and test date as one text. */
export const identityOf = (input: Pick<TestInput, 'specimenId' | 'testDate'>): string =>
  `${input.testDate ?? ''}|${input.specimenId.trim()}`;

/** The columns of a test that follow from its fields. */
export function columnsOf(input: TestInput) {
  const words = [input.specimenId, input.material, input.heat, input.operator, input.testDate, input.remarks];
  return {
    specimen_id: input.specimenId,
    identity: identityOf(input),
    sort_date: input.testDate ?? '',
    material_key: foldOrNull(input.material),
    heat_key: foldOrNull(input.heat),
    operator_key: foldOrNull(input.operator),
    section: input.geometry.section,
    search_text: foldText(
      words
        .filter((word) => word !== null)
        .join(' ')
        .slice(0, 1000),
    ),
    document: JSON.stringify(fieldsOf(input)),
  };
}

export function testOf(record: Pick<TestRecord, 'id' | 'version' | 'created_at' | 'updated_at' | 'document'>): Test {
  const fields: TestInput = JSON.parse(record.document);
  return {
    ...fields,
    id: record.id,
    version: record.version,
    createdAt: record.created_at,
    updatedAt: record.updated_at,
  };
}

/** `setAside`: the newest mark, where there is one. */
export function readingOf(row: ReadingTable & { readonly mark: number | null }): Reading {
  return {
    id: row.id,
    testId: row.test_id,
    method: row.method as Reading['method'],
    engineVersion: row.engine_version,
    photoSha256: row.photo_sha256,
    instrument: row.instrument,
    operator: row.operator,
    remarks: row.remarks,
    createdAt: row.created_at,
    setAside: (row.mark ?? row.set_aside) === 1,
    result: JSON.parse(row.result),
  };
}

export const photoOf = (row: PhotoTable): Photo => ({
  sha256: row.sha256,
  testId: row.test_id,
  fileName: row.file_name,
  mediaType: row.media_type,
  bytes: Number(row.bytes),
  widthPx: row.width_px,
  heightPx: row.height_px,
  addedAt: row.added_at,
});
