import type { PhotoMeasured } from '../records/reading.ts';
import type { MeasuredPhoto } from './measureInOrder.ts';
import type { CliOutput } from './output.ts';

const HANDS = { left: 'left-hand', right: 'right-hand', none: 'no hand' } as const;

/** One digit after the point: what a plane angle of about half a degree's uncertainty can carry. */
export const degrees = (value: number): string => `${value.toFixed(1)}°`;

/** Plane angle with its uncertainty, as a report writes it: `44.1° ± 1.2° (k = 2)`. */
export function angleText(
  measured: Pick<PhotoMeasured, 'planeAngleDeg' | 'expandedUncertaintyDeg' | 'coverageFactor'>,
): string {
  return `${degrees(measured.planeAngleDeg)} ± ${degrees(measured.expandedUncertaintyDeg)} (k = ${measured.coverageFactor})`;
}

/** A measured or refused photo in a technician's words; the first line begins with the file's name. */
export function measurementLines({ file, measurement }: MeasuredPhoto, colours: CliOutput['colours']): string[] {
  if (measurement.outcome === 'not-measured') {
    return [
      `${file}  ${colours.yellow('not measured')} (${measurement.reason.code}): ${measurement.reason.message}`,
      ...measurement.warnings.map((warning) => `  ${warning.message}`),
    ];
  }
  const tilt = measurement.planeTiltDeg === null ? '' : `, tilt ${degrees(measurement.planeTiltDeg)}`;
  const lines = [
    `${file}  ${colours.bold(angleText(measurement))}  ${measurement.shape}${tilt}, ${HANDS[measurement.hand]}`,
  ];
  if (measurement.segments.length > 1) {
    const parts = measurement.segments.map(
      (segment) =>
        `${degrees(segment.planeAngleDeg)} over ${Math.round(100 * segment.share)} %${segment.closingStep ? ' (closing step)' : ''}`,
    );
    lines.push(`  segments: ${parts.join(', ')}`);
  }
  return [...lines, ...measurement.warnings.map((warning) => `  ${colours.yellow('note')}: ${warning.message}`)];
}
