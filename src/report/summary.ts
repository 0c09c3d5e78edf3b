import { planeFigure } from '../figures/planeFigure.ts';
import type { BudgetLine, PlaneReading, Reading } from '../records/reading.ts';
import type { Test } from '../records/test.ts';
import type { Assessment } from '../verdict/model.ts';
import { degreesText, fixedText, PLANE_TITLES, percentText } from '../verdict/wording.ts';
import { CAUTIONS } from './cautions.ts';

/** What a report is made of: one test with everything known about it. */
export interface ReportedTest {
  readonly test: Test;
  readonly readings: readonly Reading[];
  readonly assessment: Assessment;
}

/** A line of a table: what, and its value as it is printed. */
export interface Fact {
  readonly label: string;
  readonly value: string;
}

/** The summary of one test: the single source of every form of report. All texts are plain text, never markup. */
export interface TestSummary {
  readonly schema: 'breakplane-test-summary/1';
  readonly program: string;
  readonly title: string;
  readonly specimen: readonly Fact[];
  readonly loads: readonly Fact[];
  readonly stresses: readonly Fact[];
  readonly planes: readonly {
    readonly plane: string;
    readonly angle: string;
    readonly normal: string;
    readonly shear: string;
  }[];
  readonly headline: string;
  readonly headlineDetail: string;
  readonly reason: string | null;
  readonly reading: readonly Fact[];
  readonly probabilities: readonly { readonly mode: string; readonly probability: string; readonly share: number }[];
  readonly evidence: readonly { readonly sign: string; readonly sentence: string }[];
  readonly notes: readonly string[];
  readonly budget: readonly {
    readonly component: string;
    readonly u: string;
    readonly evaluation: string;
    readonly explanation: string;
  }[];
  readonly rule: string | null;
  readonly cautions: readonly string[];
  readonly figureSvg: string;
  readonly figureText: string;
  /** The photo the statement rests on, or the newest one looked at; null when there is none. */
  readonly photo: { readonly sha256: string; readonly caption: string } | null;
  readonly remarks: string | null;
}

export const MODE_TITLES = {
  'shear-transverse': 'Shear, transverse plane',
  'shear-longitudinal': 'Shear, longitudinal plane',
  'normal-stress': 'Normal stress, tension plane',
  mixed: 'Mixed',
  indeterminate: 'Indeterminate',
  'not-attributable': 'Not attributable',
} as const;

const SIGN_TITLES = { supports: 'supports', neutral: 'neutral', contradicts: 'contradicts' } as const;
const METHOD_TITLES = {
  'photo-automatic': 'photo, measured by the program',
  'photo-hand': 'photo, trace set by hand',
  instrument: 'instrument, by hand',
} as const;
const SHAPE_TITLES = {
  helix: 'helix',
  plane: 'flat (plane)',
  longitudinal: 'longitudinal split',
  mixed: 'mixed',
} as const;
const HAND_TITLES = { left: 'left-hand, leans “/”', right: 'right-hand, leans “\\”', none: 'none' } as const;

const significant = (value: number, digits = 4): string => {
  if (value === 0) return '0';
  const decimals = Math.max(0, Math.min(8, digits - 1 - Math.floor(Math.log10(Math.abs(value)))));
  return fixedText(value, decimals);
};
const mpa = (value: number): string => `${fixedText(value, Math.abs(value) >= 100 ? 1 : 2)} MPa`;
const angleText = (deg: number, expandedDeg: number, k: number): string => {
  const decimals = expandedDeg < 1 ? 2 : 1;
  return `${fixedText(deg, decimals)}° ± ${expandedDeg.toFixed(decimals)}° (k = ${k})`;
};

const sectionText = (test: Test): string => {
  const { geometry } = test;
  if (geometry.section === 'solid-round') return `solid round, ⌀ ${significant(geometry.diameterMm)} mm`;
  if (geometry.section === 'hollow-round')
    return `hollow round, ⌀ ${significant(geometry.diameterMm)} mm, bore ⌀ ${significant(geometry.boreMm)} mm`;
  const { section, ...sizes } = geometry as { section: string } & Record<string, unknown>;
  return `${section.replaceAll('-', ' ')}, ${Object.entries(sizes)
    .map(([name, value]) => `${name.replace(/Mm$/, '')} ${String(value)}${name.endsWith('Mm') ? ' mm' : ''}`)
    .join(', ')}`;
};

type Part = (reported: ReportedTest) => readonly Fact[];

const given = (label: string, value: string | null | undefined): Fact[] =>
  value === null || value === undefined || value === '' ? [] : [{ label, value }];

const specimenPart: Part = ({ test }) => [
  { label: 'Specimen', value: test.specimenId },
  ...given('Test date', test.testDate),
  ...given('Material', test.material),
  ...given('Heat', test.heat),
  { label: 'Section', value: sectionText(test) },
  ...given('Gauge length', test.gaugeLengthMm === null ? null : `${significant(test.gaugeLengthMm)} mm`),
  ...given('Operator', test.operator),
];

const loadsPart: Part = ({ test }) => [
  {
    label: 'Largest torque',
    value: test.torqueMaxNm === null ? 'not recorded' : `${significant(test.torqueMaxNm)} N·m`,
  },
  {
    label: 'Torque direction',
    value:
      test.torqueDirection === null
        ? 'not recorded'
        : test.torqueDirection === 'ccw'
          ? 'counter-clockwise, facing the driven end'
          : 'clockwise, facing the driven end',
  },
  ...given('Twist at fracture', test.twistFractureDeg === null ? null : `${significant(test.twistFractureDeg)}°`),
  ...given('Axial force', test.axialForceN === null ? null : `${significant(test.axialForceN)} N`),
  ...given('Bending moment', test.bendingMomentNm === null ? null : `${significant(test.bendingMomentNm)} N·m`),
];

const stressPart: Part = ({ assessment }) => {
  const { stress } = assessment;
  if (stress === null) return [{ label: 'Stresses', value: 'no torque recorded; planes of pure torsion' }];
  return [
    { label: stress.elastic.label, value: mpa(stress.elastic.shearStressMPa) },
    { label: stress.fullyPlastic.label, value: mpa(stress.fullyPlastic.shearStressMPa) },
    { label: 'Largest normal stress σ1', value: mpa(stress.sigma1MPa) },
    { label: 'Largest shear stress', value: mpa(stress.maxShearMPa) },
  ];
};

const governing = ({ readings, assessment }: ReportedTest): Reading | null =>
  readings.find((r) => r.id === assessment.readingId) ?? null;

const readingPart: Part = (reported) => {
  const reading = governing(reported);
  if (reading === null) {
    const last = [...reported.readings].reverse().find((r) => r.result.outcome === 'not-measured');
    return last?.result.outcome === 'not-measured'
      ? [{ label: 'Plane angle θ', value: `not measured: ${last.result.reason.message}` }]
      : [{ label: 'Plane angle θ', value: 'not measured' }];
  }
  const result = reading.result as PlaneReading;
  return [
    {
      label: 'Plane angle θ',
      value: angleText(result.planeAngleDeg, result.expandedUncertaintyDeg, result.coverageFactor),
    },
    ...(result.planeTiltDeg === null
      ? []
      : [
          {
            label: 'Tilt β of the flat break',
            value: angleText(
              result.planeTiltDeg,
              result.planeTiltExpandedUncertaintyDeg ?? result.expandedUncertaintyDeg,
              result.coverageFactor,
            ),
          },
        ]),
    { label: 'Hand', value: HAND_TITLES[result.hand] },
    { label: 'Shape of the trace', value: SHAPE_TITLES[result.shape] },
    ...(result.segments.length > 1
      ? [
          {
            label: 'Segments',
            value: result.segments
              .map(
                (s) =>
                  `${degreesText(s.planeAngleDeg)} over ${percentText(s.share)}${s.closingStep === true ? ' (closing step)' : ''}`,
              )
              .join('; '),
          },
        ]
      : []),
    { label: 'Measured with', value: reading.instrument ?? METHOD_TITLES[reading.method] },
    ...given('Engine', reading.engineVersion),
    ...given('Reading by', reading.operator),
  ];
};

/** The tables of a report in their order; a further one is added here. */
export const SUMMARY_PARTS: Readonly<Record<'specimen' | 'loads' | 'stresses' | 'reading', Part>> = {
  specimen: specimenPart,
  loads: loadsPart,
  stresses: stressPart,
  reading: readingPart,
};

const budgetOf = (reading: Reading | null): readonly BudgetLine[] =>
  reading !== null && reading.result.outcome === 'measured' ? (reading.result.budget ?? []) : [];

/** Draws up the summary of a test. Pure: the same test gives the same summary. */
export function summariseTest(reported: ReportedTest, version: string): TestSummary {
  const { test, assessment, readings } = reported;
  const { statement } = assessment;
  const reading = governing(reported);
  const shown = reading === null ? null : (reading.result as PlaneReading);
  const photoReading =
    reading?.photoSha256 != null ? reading : ([...readings].reverse().find((r) => r.photoSha256 !== null) ?? null);
  const figureText = `Stresses on the planes of ${test.specimenId}`;
  return {
    schema: 'breakplane-test-summary/1',
    program: `Breakplane ${version}`,
    title: `Failure mode of ${test.specimenId}`,
    specimen: SUMMARY_PARTS.specimen(reported),
    loads: SUMMARY_PARTS.loads(reported),
    stresses: SUMMARY_PARTS.stresses(reported),
    planes: assessment.planes.map((p) => ({
      plane: PLANE_TITLES[p.plane],
      angle: degreesText(p.planeAngleDeg),
      normal: assessment.stress === null ? '–' : mpa(p.normalStressMPa),
      shear: assessment.stress === null ? '–' : mpa(p.shearStressMPa),
    })),
    headline: statement === null ? 'No statement' : MODE_TITLES[statement.mode],
    headlineDetail:
      statement === null
        ? 'no plane angle to rest on'
        : statement.mode === 'indeterminate'
          ? `likeliest: ${MODE_TITLES[statement.likeliestMode]}, ${percentText(statement.probability)}`
          : `probability ${percentText(statement.probability)}`,
    reason: statement?.reason?.message ?? null,
    reading: SUMMARY_PARTS.reading(reported),
    probabilities:
      statement === null
        ? []
        : (['normal-stress', 'shear-transverse', 'shear-longitudinal'] as const).map((mode) => ({
            mode: MODE_TITLES[mode],
            probability: percentText(statement.modeProbabilities[mode]),
            share: statement.modeProbabilities[mode],
          })),
    evidence: (statement?.evidence ?? []).map((e) => ({ sign: SIGN_TITLES[e.sign], sentence: e.sentence })),
    notes: assessment.notes,
    budget: budgetOf(reading).map((b) => ({
      component: b.component.replaceAll('-', ' '),
      u: `${b.standardUncertaintyDeg.toFixed(2)}°`,
      evaluation: b.evaluation,
      explanation: b.explanation,
    })),
    rule: statement?.ruleText ?? null,
    cautions: CAUTIONS,
    figureSvg: planeFigure(assessment, shown, { title: figureText }),
    figureText,
    photo:
      photoReading?.photoSha256 == null
        ? null
        : {
            sha256: photoReading.photoSha256,
            caption: `Photo (SHA-256 ${photoReading.photoSha256.slice(0, 16)}…) with axis, specimen edges and fracture trace`,
          },
    remarks: test.remarks,
  };
}

/** The overlay of the photo a summary shows. */
export function overlayOf(reported: ReportedTest, sha256: string) {
  const reading =
    governing(reported)?.photoSha256 === sha256
      ? governing(reported)
      : ([...reported.readings].reverse().find((r) => r.photoSha256 === sha256) ?? null);
  if (reading === null) return {};
  const { result } = reading;
  if (result.outcome === 'measured') {
    return { axisPx: result.axisPx, diameterPx: result.diameterPx, edgesPx: result.edgesPx, tracePx: result.tracePx };
  }
  return result.outcome === 'not-measured' ? { axisPx: result.axisPx, diameterPx: result.diameterPx } : {};
}
