import type { Generated, Insertable, Selectable } from 'kysely';

/** A test with the newest version of its fields, and what its readings say, kept beside it so that lists are fast. */
export interface TestTable {
  id: string;
  specimen_id: string;
  /** Specimen id and test date together: no two tests have the same. */
  identity: string;
  /** Test date, or empty text where there is none: what lists are ordered by. */
  sort_date: string;
  material_key: string | null;
  heat_key: string | null;
  operator_key: string | null;
  section: string;
  search_text: string;
  /** The fields as JSON, in the order of `TestInput`. */
  document: string;
  version: number;
  created_at: string;
  updated_at: string;
  changed_by: string | null;
  change_reason: string | null;
  mode: string | null;
  probability: number | null;
  plane_angle_deg: number | null;
  expanded_uncertainty_deg: number | null;
  photo_count: number;
  reading_count: number;
  flags: string;
  flag_count: number;
  /** 1 when a person has looked at the test as it stands now; any change takes it back. */
  reviewed: Generated<number>;
  /** Which assessment the derived columns come from; another one than today's is made anew. */
  assessed_with: string;
}

/** Earlier versions of a test; a version moves here when it is replaced. */
export interface TestVersionTable {
  test_id: string;
  version: number;
  document: string;
  made_at: string;
  made_by: string | null;
  reason: string | null;
}

/** Readings are only ever added. */
export interface ReadingTable {
  id: string;
  test_id: string;
  method: string;
  engine_version: string | null;
  photo_sha256: string | null;
  instrument: string | null;
  operator: string | null;
  remarks: string | null;
  created_at: string;
  set_aside: number;
  result: string;
}

/** Setting a reading aside and taking it back: only ever added; the newest mark counts. */
export interface ReadingMarkTable {
  id: string;
  reading_id: string;
  set_aside: number;
  made_at: string;
  made_by: string | null;
  reason: string | null;
}

/** A person has looked at a test, as it stood at that version: only ever added. */
export interface ReviewTable {
  id: string;
  test_id: string;
  version: number;
  made_at: string;
  made_by: string;
  note: string | null;
}

/** A photo of a test; the bytes lie once in the photo folder, however many tests they belong to. */
export interface PhotoTable {
  id: string;
  sha256: string;
  test_id: string | null;
  file_name: string;
  media_type: string;
  bytes: number;
  width_px: number | null;
  height_px: number | null;
  added_at: string;
}

export type MeasuringState = 'waiting' | 'running' | 'done' | 'set-aside' | 'cancelled';

/** The measuring queue: one row a measurement that is due or was made. */
export interface MeasuringTable {
  id: string;
  photo_sha256: string;
  test_id: string;
  state: MeasuringState;
  /** Smaller is sooner: 0 for a person who waits, 1 for an import. */
  priority: number;
  tries: number;
  reason: string | null;
  queued_at: string;
  started_at: string | null;
  ended_at: string | null;
}

export interface ImportTable {
  id: string;
  file_name: string;
  dry_run: number;
  started_at: string;
  ended_at: string;
  summary: string;
}

export interface SettingTable {
  name: string;
  value: string;
}

export interface StoreSchema {
  tests: TestTable;
  test_versions: TestVersionTable;
  readings: ReadingTable;
  reading_marks: ReadingMarkTable;
  reviews: ReviewTable;
  photos: PhotoTable;
  measuring: MeasuringTable;
  imports: ImportTable;
  settings: SettingTable;
}

export type TestRecord = Selectable<TestTable>;
export type NewTestRecord = Insertable<TestTable>;
