import type { SectionGeometry } from '../../src/records/geometry.ts';
import { shownQuantity, type UnitSystem } from '../units/unitSystem.ts';

/** "⌀ 12.7 mm", "⌀ 25 × 19 mm": the section in one glance. */
export function sectionText(geometry: SectionGeometry, system: UnitSystem): string {
  const length = (valueMm: number) => String(Number.parseFloat(shownQuantity(valueMm, 'length', system, 5)));
  const unit = shownQuantity(0, 'length', system).replace('0 ', '');
  switch (geometry.section) {
    case 'solid-round':
      return `⌀ ${length(geometry.diameterMm)} ${unit}`;
    case 'hollow-round':
      return `⌀ ${length(geometry.diameterMm)} / ${length(geometry.boreMm)} ${unit}`;
    case 'rectangle':
      return `${length(geometry.widthMm)} × ${length(geometry.heightMm)} ${unit}`;
    case 'square':
      return `□ ${length(geometry.sideMm)} ${unit}`;
    case 'ellipse':
      return `⬭ ${length(geometry.majorAxisMm)} × ${length(geometry.minorAxisMm)} ${unit}`;
    case 'equilateral-triangle':
      return `△ ${length(geometry.sideMm)} ${unit}`;
    case 'hexagon':
      return `⬡ ${length(geometry.acrossFlatsMm)} ${unit}`;
    case 'rectangular-tube':
      return `${length(geometry.widthMm)} × ${length(geometry.heightMm)} / ${length(geometry.wallMm)} ${unit}`;
  }
}
