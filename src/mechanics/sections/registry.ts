import type { SectionGeometry } from '../../records/geometry.ts';
import { ellipseProperties } from './ellipse.ts';
import { equilateralTriangleProperties } from './equilateralTriangle.ts';
import { hexagonProperties } from './hexagon.ts';
import { hollowRoundProperties } from './hollowRound.ts';
import { rectangleProperties, squareProperties } from './rectangle.ts';
import { rectangularTubeProperties } from './rectangularTube.ts';
import type { SectionProperties } from './section.ts';
import { solidRoundProperties } from './solidRound.ts';

type GeometryOf<S extends SectionGeometry['section']> = Extract<SectionGeometry, { section: S }>;

/** The one list of sections: name in words, and the properties from the dimensions. */
export const SECTIONS: {
  readonly [S in SectionGeometry['section']]: {
    readonly title: string;
    readonly properties: (geometry: GeometryOf<S>) => SectionProperties;
  };
} = {
  'solid-round': { title: 'solid round', properties: solidRoundProperties },
  'hollow-round': { title: 'hollow round', properties: hollowRoundProperties },
  rectangle: { title: 'rectangle', properties: rectangleProperties },
  square: { title: 'square', properties: squareProperties },
  ellipse: { title: 'ellipse', properties: ellipseProperties },
  'equilateral-triangle': { title: 'equilateral triangle', properties: equilateralTriangleProperties },
  hexagon: { title: 'hexagon', properties: hexagonProperties },
  'rectangular-tube': { title: 'rectangular tube', properties: rectangularTubeProperties },
};

/** Properties of any section from its dimensions. @throws LabError naming the dimension that cannot be */
export function sectionProperties(geometry: SectionGeometry): SectionProperties {
  const section = SECTIONS[geometry.section] as { properties: (g: SectionGeometry) => SectionProperties };
  return section.properties(geometry);
}

/** Bars, wires and tubes with a round outside: the surface unrolls, and the torsion formulas are exact beyond yield too. */
export const isRound = (
  geometry: SectionGeometry,
): geometry is Extract<SectionGeometry, { section: 'solid-round' | 'hollow-round' }> =>
  geometry.section === 'solid-round' || geometry.section === 'hollow-round';
