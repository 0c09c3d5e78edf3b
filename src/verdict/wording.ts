import type { PredictedPlaneName } from '../mechanics/stressState.ts';

/** How sentences write numbers and planes; one place, so that page, report and command line agree. */

/** `−44.0°`, one decimal, true minus sign. */
export const degreesText = (deg: number): string => `${fixedText(deg, 1)}°`;

/** A number with a true minus sign; never "−0.0". */
export function fixedText(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? `−${text}` : text;
}

/** `95 %`; one decimal where it matters, never "100 %" for something that is not certain. */
export function percentText(probability: number): string {
  const percent = probability * 100;
  if (percent > 99.95) return '> 99.9 %';
  if (percent < 0.05) return '< 0.1 %';
  return `${percent.toFixed(percent > 99 || percent < 1 ? 1 : 0)} %`;
}

export const PLANE_TITLES: Readonly<Record<PredictedPlaneName, string>> = {
  tension: 'tension plane',
  compression: 'compression plane',
  'shear-transverse': 'transverse shear plane',
  'shear-longitudinal': 'longitudinal shear plane',
};
