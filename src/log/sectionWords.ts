import type { SectionGeometry } from '../records/geometry.ts';

export type SectionName = SectionGeometry['section'];

/**
 * Words laboratories write for a section, in the languages of the headers; compared after `fold`. The canonical name itself
 * needs no entry. Trade usage, collected by common practice.
 */
const WORDS: Readonly<Record<SectionName, string>> = {
  'solid-round': `solid, round, round solid, round bar, bar, rod, wire, dowel, circular, solid circular, rund, vollrund, Rundstab,
    Vollstab, Draht, rond, rond plein, plein, barre, fil, redondo, macizo, barra, alambre, tondo, pieno, filo, maciço, arame,
    pręt, stång, 实心, 圆棒, 丸棒`,
  'hollow-round': `hollow, tube, pipe, tubular, round tube, hollow circular, Rohr, Rundrohr, hohl, hohlrund, Hohlprofil, creux,
    tubo, hueco, cavo, oco, rura, rör, 空心, 管, 中空`,
  rectangle: `rectangular, flat, flat bar, Rechteck, rechteckig, Flachstab, plat, rectangulaire, rectángulo, rectangular, pletina,
    rettangolo, rettangolare, piatto, retângulo, retangular, prostokąt, rektangel, 矩形, 長方形`,
  square:
    'square bar, Quadrat, quadratisch, Vierkant, carré, cuadrado, quadrato, quadro, quadrado, kwadrat, kvadrat, 方形, 正方形',
  ellipse: 'elliptical, oval, elliptisch, elliptique, elíptico, ellittico, 椭圆, 楕円',
  'equilateral-triangle':
    'triangle, triangular, Dreieck, triangulaire, triángulo, triangolo, triângulo, trójkąt, 三角形',
  hexagon:
    'hexagonal, hex, hex bar, Sechskant, sechskantig, hexagone, six pans, hexágono, esagono, sextavado, sześciokąt, 六角',
  'rectangular-tube': `rectangular hollow, rhs, square tube, shs, box, Rechteckrohr, Vierkantrohr, tube rectangulaire, tubo rectangular,
    tubo rettangolare, scatolato, 矩形管, 角管`,
};

const fold = (text: string): string =>
  text
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replaceAll('ø', 'o')
    .toLowerCase()
    .replace(/[\s_.-]+/g, '');

export const SECTION_NAMES = Object.keys(WORDS) as readonly SectionName[];

const BY_WORD = new Map<string, SectionName>(
  SECTION_NAMES.flatMap((section) =>
    [section, ...WORDS[section].split(',')].map((word): [string, SectionName] => [fold(word), section]),
  ),
);

/** The section a word means; undefined for a word that is none. */
export const sectionOfWord = (word: string): SectionName | undefined => BY_WORD.get(fold(word));
