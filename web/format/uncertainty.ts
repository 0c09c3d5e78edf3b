import { fixedText } from '../../src/verdict/wording.ts';

/** Decimals that leave an expanded uncertainty two significant digits (GUM 7.2.6); 1 where it is not known. */
export function decimalsFor(expandedUncertainty: number): number {
  if (!(expandedUncertainty > 0) || !Number.isFinite(expandedUncertainty)) return 1;
  return Math.min(3, Math.max(0, 1 - Math.floor(Math.log10(expandedUncertainty))));
}

/** "44.1° ± 1.2°": value and expanded uncertainty to the same decimals. */
export function angleWithUncertainty(valueDeg: number, expandedUncertaintyDeg: number): string {
  const decimals = decimalsFor(expandedUncertaintyDeg);
  return `${fixedText(valueDeg, decimals)}° ± ${fixedText(expandedUncertaintyDeg, decimals)}°`;
}
