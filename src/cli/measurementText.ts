import { degToRad } from '../angle.ts';
import { isRound } from '../mechanics/sections/registry.ts';
import type { TestLoads } from '../mechanics/surfaceStress.ts';
import type { PhotoMeasured } from '../records/reading.ts';
import { assessReading } from '../verdict/assessReading.ts';
import { degreesText, fixedText } from '../verdict/wording.ts';
import { statementLines } from './assessmentText.ts';
import type { MeasuredPhoto } from './measureInOrder.ts';
import type { CliOutput } from './output.ts';

type Colours = CliOutput['colours'];

const HANDS = { left: ', left-hand', right: ', right-hand', none: '' } as const;

/** Plane angle with its uncertainty, as a report writes it: `44.1° ± 1.2° (k = 2)`. */
export function angleText(
  measured: Pick<PhotoMeasured, 'planeAngleDeg' | 'expandedUncertaintyDeg' | 'coverageFactor'>,
): string {
  const { planeAngleDeg, expandedUncertaintyDeg, coverageFactor } = measured;
  return `${degreesText(planeAngleDeg)} ± ${degreesText(expandedUncertaintyDeg)} (k = ${coverageFactor})`;
}

/** How far the helix climbs in one turn: about the length of the longitudinal step that closes it. */
function pitchLines({ shape, planeAngleDeg }: PhotoMeasured, diameterMm: number | undefined): string[] {
  if (diameterMm === undefined || shape !== 'helix' || Math.abs(planeAngleDeg) < 10 || Math.abs(planeAngleDeg) > 80) {
    return [];
  }
  const pitchMm = Math.PI * diameterMm * Math.abs(Math.tan(degToRad(planeAngleDeg)));
  return [
    `this helix climbs ${fixedText(pitchMm, 1)} mm in one turn: a closing step of about that length belongs to it`,
  ];
}

const outsideDiameterMm = ({ geometry }: TestLoads): number | undefined =>
  geometry && isRound(geometry) ? geometry.diameterMm : undefined;

function meaningLines(measured: PhotoMeasured, loads: TestLoads, colours: Colours): string[] {
  const { statement } = assessReading(loads, measured);
  return [...pitchLines(measured, outsideDiameterMm(loads)), ...(statement ? statementLines(statement, colours) : [])];
}

/**
 * A measured or refused photo in a technician's words; the first line begins with the file's name.
 * @param loads what was typed beside the photo; the lines then also say what the angle means. Null: nothing was.
 */
export function measurementLines(
  { file, measurement }: MeasuredPhoto,
  loads: TestLoads | null,
  colours: Colours,
): string[] {
  const notes = measurement.warnings.map((warning) => `  ${colours.yellow('note')}: ${warning.message}`);
  if (measurement.outcome === 'not-measured') {
    const { code, message } = measurement.reason;
    return [`${file}  ${colours.yellow('not measured')} (${code}): ${message}`, ...notes];
  }
  const tilt = measurement.planeTiltDeg === null ? '' : `, tilt ${degreesText(measurement.planeTiltDeg)}`;
  const segments = measurement.segments.map(
    (segment) =>
      `${degreesText(segment.planeAngleDeg)} over ${Math.round(100 * segment.share)} %${segment.closingStep ? ' (closing step)' : ''}`,
  );
  return [
    `${file}  ${colours.bold(angleText(measurement))}  ${measurement.shape}${tilt}${HANDS[measurement.hand]}`,
    ...(segments.length > 1 ? [`  segments: ${segments.join(', ')}`] : []),
    ...(loads ? meaningLines(measurement, loads, colours).map((line) => `  ${line}`) : []),
    ...notes,
  ];
}
