import type { SectionGeometry } from '../../records/geometry.ts';
import { hollowRoundProperties } from './hollowRound.ts';
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
};

/** Properties of any section from its dimensions. @throws LabError naming the dimension that cannot be */
export function sectionProperties(geometry: SectionGeometry): SectionProperties {
  const section = SECTIONS[geometry.section] as { properties: (g: SectionGeometry) => SectionProperties };
  return section.properties(geometry);
}
