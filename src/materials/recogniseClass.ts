import type { MaterialClassId } from './classes.ts';

/**
 * Names and designations, looked for in this order; the first that fits wins. Common practice: EN, DIN, ASTM, SAE and
 * everyday names. Hardened steels are left out on purpose: how they break depends on their hardness.
 */
const PATTERNS: readonly (readonly [MaterialClassId, RegExp])[] = [
  ['nodular-iron', /\bgjs\b|en-?gjs|\bggg[ -]?\d|ductile (cast )?iron|nodular|spheroidal|kugelgraphit|fonte gs\b/i],
  ['malleable-iron', /\bgjm[bw]?\b|en-?gjm|malleable|temperguss|\bastm a47\b/i],
  [
    'grey-iron',
    /\bgjl\b|en-?gjl|\bgg[ -]?\d\d\b|gr[ea]y (cast )?iron|gr[ea]y-iron|grauguss|fonte grise|\bastm a48\b|lamellar graphite/i,
  ],
  ['chalk', /\bchalk\b|\bkreide\b|\bcraie\b|plaster of paris|\bgypsum\b/i],
  ['concrete', /\bconcrete\b|\bmortar\b|\bbeton\b|\bbéton\b/i],
  ['ceramic', /\bceramics?\b|\bkeramik\b|\bglass\b|\bal2o3\b|\balumina\b|\bzirconia\b|\bzro2\b|\bsi3n4\b/i],
  ['cortical-bone', /\b(cortical )?bone\b|\btibia\b|\bfemur\b|\bknochen\b/i],
  [
    'wood',
    /\bwood(en)?\b|\bdowel\b|\b(beech|oak|birch|spruce|pine|maple|poplar|hickory|walnut)\b|\bholz\b|\bbuche\b|\beiche\b|\bfichte\b|\bbois\b|\bhêtre\b/i,
  ],
  ['wrought-aluminium', /alumin[iu]|\bal(mg|cu|zn|si|mn)\w*|\ben[ -]?aw\b|\b(aa ?)?[2567]\d{3}[- ]?[tTH]\d/i],
  ['magnesium-alloy', /magnesium|\baz(31|61|80|91)\w?\b/i],
  [
    'copper-alloy',
    /\bcopper\b|\bbrass\b|\bbronze\b|\bmessing\b|\bkupfer\b|\bcu(zn|sn|ni|cr|be)\w*|\blaiton\b|\bcw\d{3}[a-z]\b/i,
  ],
  [
    'wrought-steel',
    /\bsteel\b|stahl\b|\bacier\b|\b(aisi|sae)[ -]?\d{4}\b|\bc\d{2}[er]?\b|\b[se]\d{3}(j|n|m|q)?\w*\b|\b1\.[04-8]\d{3}\b|\b\d{2}(cr|mn|ni|si|crmo|crnimo)\w*|\bx\d+cr\w*/i,
  ],
];

const HARDENED = /hardened|\bhrc\b|tool steel|gehärtet|werkzeugstahl|as-quenched|martensitic as/i;

/** The class a material's name speaks of; null when it does not say, or says two things. Never a guess from a digit alone. */
export function recogniseMaterialClass(name: string | null | undefined): MaterialClassId | null {
  if (!name) return null;
  const known = CACHE.get(name);
  if (known !== undefined) return known;
  const found = HARDENED.test(name) ? null : (PATTERNS.find(([, pattern]) => pattern.test(name))?.[0] ?? null);
  if (CACHE.size >= MOST_NAMES) CACHE.clear();
  CACHE.set(name, found);
  return found;
}

/** A log repeats few names many times. */
const CACHE = new Map<string, MaterialClassId | null>();
const MOST_NAMES = 2000;
