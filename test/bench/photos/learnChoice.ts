/**
 * Fits the weights with which the measurement chooses between the ways to read a photo and decides whether to trust the
 * best of them (src/photo/choice.ts), on rendered photos with truth:
 *
 *     tsx test/bench/photos/learnChoice.ts FOLDER… [--keep FILE] [--from FILE] [--write]
 *
 * `--keep` stores the features looked up, `--from` takes them up again without measuring, `--write` replaces the weights.
 * The figures printed are cross-validated: every photo is judged by weights fitted without it.
 */
import { readFile, writeFile } from 'node:fs/promises';
import { Matrix, solve } from 'ml-matrix';
import { planeAngleDistanceDeg } from '../../../src/angle.ts';
import { acceptanceFeatures, type PhotoReading } from '../../../src/photo/choice.ts';
import { readingsOf } from '../../../src/photo/measurePicture.ts';
import { openPhoto } from '../../../src/photo/node/decode.ts';
import { frameFromAxis, type SpecimenFrame, toPhoto } from '../../../src/photo/unroll.ts';
import { readPhotoSet } from './truth.ts';

interface Sample {
  readonly photo: string;
  readonly view: 'pair' | 'half';
  readonly angleDeg: number | null;
  readonly features: Readonly<Record<string, number>>;
  readonly right: boolean;
}

type Point = readonly [number, number];
interface Geometry {
  readonly axisImagePx?: readonly [Point, Point];
  readonly diameterPx?: number;
  readonly trueDeg?: number | null;
  readonly traceImagePx?: readonly (readonly Point[])[] | readonly Point[];
}

/** Right: the specimen's own edges, a trace that keeps to the true one, and an angle within 6° of the true one (the quick fit is a rough one). */
function isRight(reading: PhotoReading, truth: Geometry, view: string | null | undefined, scale: number): boolean {
  const { axisImagePx, diameterPx, traceImagePx } = truth;
  if (axisImagePx === undefined || diameterPx === undefined || traceImagePx === undefined || view !== reading.view)
    return false;
  const scaled = (p: Point) => ({ xPx: p[0] * scale, yPx: p[1] * scale });
  const own = frameFromAxis(scaled(axisImagePx[0]), scaled(axisImagePx[1]), diameterPx * scale);
  const { frame } = reading.candidate;
  const turn = Math.abs(own.alongX * frame.alongY - own.alongY * frame.alongX);
  const offset = Math.abs(
    (own.originPx.xPx - frame.originPx.xPx) * frame.alongY - (own.originPx.yPx - frame.originPx.yPx) * frame.alongX,
  );
  // Along the axis the two origins differ: a small turn between the axes is allowed for.
  const apart = Math.hypot(own.originPx.xPx - frame.originPx.xPx, own.originPx.yPx - frame.originPx.yPx);
  if (
    turn > 0.02 ||
    offset > 0.07 * frame.radiusPx + apart * turn ||
    Math.abs(frame.radiusPx / own.radiusPx - 1) > 0.07
  )
    return false;
  const lists = (Array.isArray(traceImagePx[0]?.[0]) ? traceImagePx : [traceImagePx]) as readonly (readonly Point[])[];
  const trueSteps = lists.flatMap((list) =>
    list.slice(1).map((p, i) => [scaled(list[i] as Point), scaled(p)] as const),
  );
  let near = 0;
  let counted = 0;
  for (const p of reading.points) {
    if (Math.abs(p.phi) > 1.05) continue;
    counted += 1;
    const q = toPhoto(frame as SpecimenFrame, p);
    let best = Number.POSITIVE_INFINITY;
    for (const [a, b] of trueSteps) {
      const dx = b.xPx - a.xPx;
      const dy = b.yPx - a.yPx;
      const t = Math.max(
        0,
        Math.min(1, ((q.xPx - a.xPx) * dx + (q.yPx - a.yPx) * dy) / Math.max(1e-9, dx * dx + dy * dy)),
      );
      best = Math.min(best, Math.hypot(q.xPx - a.xPx - t * dx, q.yPx - a.yPx - t * dy));
    }
    if (best < 0.12 * frame.radiusPx) near += 1;
  }
  const share = counted === 0 ? 0 : near / counted;
  const { trueDeg } = truth;
  if (trueDeg === undefined || trueDeg === null) return share > 0.8;
  return share > 0.5 && reading.fit !== null && planeAngleDistanceDeg(reading.fit.planeAngleDeg, trueDeg) < 6;
}

async function samplesOf(folder: string): Promise<Sample[]> {
  const samples: Sample[] = [];
  for (const photo of await readPhotoSet(folder)) {
    const opened = await openPhoto(await readFile(photo.path));
    if (opened.outcome !== 'open') continue;
    const picture = await opened.photo.whole(1600);
    const truth = JSON.parse(await readFile(photo.path.replace(/\.\w+$/, '.json'), 'utf8')) as Geometry;
    const trueDeg = photo.truth.kind === 'mixed' ? null : photo.truth.visibleFrontThetaDeg;
    const sample = readingsOf(picture).map((r) => ({
      photo: `${folder}/${photo.file}`,
      view: r.view,
      angleDeg: r.fit?.planeAngleDeg ?? null,
      features: r.features,
      right: photo.truth.kind !== 'none' && isRight(r, { ...truth, trueDeg }, photo.truth.view, picture.scale),
    }));
    samples.push(...sample);
    process.stderr.write(
      `${photo.file} ${photo.truth.view ?? ''} ${sample.filter((s) => s.right).length} right of ${sample.length}\n`,
    );
  }
  return samples;
}

type Weights = Record<string, number>;
type Photo = readonly Sample[];

/** Names of the features by view, `pair.gap` and so on; each view has weights of its own. */
const named = (s: Sample): Weights => ({
  ...Object.fromEntries(Object.entries(s.features).map(([n, v]) => [`${s.view}.${n}`, v])),
  [`${s.view}.constant`]: 1,
});

/** What a laboratory would weigh before it has seen any photo: a clear, whole, single gap between two clear edges. */
const BEFORE: Weights = Object.fromEntries(
  (['pair', 'half'] as const).flatMap((view) => [
    ...['edges', 'length', 'sharp', 'width', 'round', 'outside', 'unlike', 'shadow', 'nested', 'glare'].map((n) => [
      `${view}.${n}`,
      1,
    ]),
    [`${view}.contrast`, 0.5],
    ['pair.gap', 1],
    ['pair.missingEnd', -3],
    ['pair.sides', 1],
    ['pair.unique', 0.5],
    ['pair.isPart', -2],
    ['half.clear', 2],
    ['half.rim', 0.5],
    ['half.sawn', -2],
    ['half.gap', -0.5],
  ]),
);

interface Scale {
  readonly names: readonly string[];
  readonly spread: readonly number[];
}

function scaleOf(samples: readonly Sample[]): Scale {
  const all = samples.map(named);
  const names = [...new Set(all.flatMap((f) => Object.keys(f)))].sort();
  const spread = names.map((n) => {
    const view = n.split('.')[0];
    const values = samples.filter((s) => s.view === view).map((s) => named(s)[n] ?? 0);
    const mean = values.reduce((a, b) => a + b, 0) / Math.max(1, values.length);
    return Math.max(0.02, Math.sqrt(values.reduce((a, b) => a + (b - mean) ** 2, 0) / Math.max(1, values.length)));
  });
  return { names, spread };
}

/** Conditional logit (McFadden 1974) with a normal prior round {@link BEFORE}: gradient ascent with momentum on both scales. */
function fitChoice(photos: readonly Photo[], { names, spread }: Scale, ridge: number): Weights {
  const useful = photos
    .filter((photo) => photo.some((s) => s.right) && photo.some((s) => !s.right))
    .map((photo) => ({
      x: photo.map((s) => {
        const f = named(s);
        return Float64Array.from(names, (n, k) => (f[n] ?? 0) / (spread[k] as number));
      }),
      right: photo.map((s) => s.right),
    }));
  const before = Float64Array.from(names, (n, k) => (BEFORE[n] ?? 0) * (spread[k] as number));
  const w = Float64Array.from(before);
  const first = new Float64Array(w.length);
  const second = new Float64Array(w.length);
  for (let t = 1; t <= 700; t++) {
    const gradient = new Float64Array(w.length);
    for (const { x, right } of useful) {
      const z = x.map((row) => row.reduce((a, v, k) => a + v * (w[k] as number), 0));
      const top = Math.max(...z);
      const e = z.map((v) => Math.exp(v - top));
      const all = e.reduce((a, b) => a + b, 0);
      const good = e.reduce((a, v, i) => a + (right[i] ? v : 0), 0);
      x.forEach((row, i) => {
        const pull = (right[i] ? (e[i] as number) / good : 0) - (e[i] as number) / all;
        for (let k = 0; k < w.length; k++) gradient[k] = (gradient[k] as number) + pull * (row[k] as number);
      });
    }
    const rate = t < 450 ? 0.05 : 0.012;
    for (let k = 0; k < w.length; k++) {
      const g =
        ((gradient[k] as number) - ridge * ((w[k] as number) - (before[k] as number))) / Math.max(1, useful.length);
      first[k] = 0.9 * (first[k] as number) + 0.1 * g;
      second[k] = 0.999 * (second[k] as number) + 0.001 * g * g;
      const step = (first[k] as number) / (1 - 0.9 ** t) / (Math.sqrt((second[k] as number) / (1 - 0.999 ** t)) + 1e-8);
      w[k] = (w[k] as number) + rate * step;
    }
  }
  return Object.fromEntries(names.map((n, k) => [n, (w[k] as number) / (spread[k] as number)]));
}

const weighted = (s: Sample, w: Weights) => Object.entries(named(s)).reduce((a, [n, v]) => a + (w[n] ?? 0) * v, 0);

interface Chosen {
  readonly photo: string;
  readonly features: Weights;
  readonly right: boolean;
  readonly possible: boolean;
}

function choose(photo: Photo, w: Weights): Chosen {
  const sorted = photo
    .map((s) => ({
      view: s.view,
      value: weighted(s, w),
      fit: s.angleDeg === null ? null : { planeAngleDeg: s.angleDeg },
      features: s.features,
      right: s.right,
    }))
    .sort((a, b) => b.value - a.value);
  return {
    photo: photo[0]?.photo ?? '',
    features: acceptanceFeatures(sorted),
    right: sorted[0]?.right ?? false,
    possible: photo.some((s) => s.right),
  };
}

/** Newton's iterations for the penalised likelihood; features are standardised inside, weights returned in their own units. */
function fitLogistic(
  samples: readonly { readonly features: Weights; readonly right: boolean }[],
  ridge: number,
): Weights {
  const names = [...new Set(samples.flatMap((s) => Object.keys(s.features)))].sort();
  const mean = names.map((n) => samples.reduce((a, s) => a + (s.features[n] ?? 0), 0) / samples.length);
  const spread = names.map((n, k) =>
    Math.max(
      1e-3,
      Math.sqrt(samples.reduce((a, s) => a + ((s.features[n] ?? 0) - (mean[k] as number)) ** 2, 0) / samples.length),
    ),
  );
  const rows = samples.map((s) => [
    1,
    ...names.map((n, k) => ((s.features[n] ?? 0) - (mean[k] as number)) / (spread[k] as number)),
  ]);
  let w = new Array<number>(names.length + 1).fill(0);
  for (let round = 0; round < 30; round++) {
    const gradient = new Array<number>(w.length).fill(0);
    const hessian = Matrix.zeros(w.length, w.length);
    samples.forEach((s, i) => {
      const x = rows[i] as number[];
      const p = 1 / (1 + Math.exp(-x.reduce((a, v, k) => a + v * (w[k] as number), 0)));
      const e = (s.right ? 1 : 0) - p;
      const q = Math.max(1e-6, p * (1 - p));
      for (let a = 0; a < w.length; a++) {
        gradient[a] = (gradient[a] as number) + e * (x[a] as number);
        for (let b = 0; b < w.length; b++)
          hessian.set(a, b, hessian.get(a, b) + q * (x[a] as number) * (x[b] as number));
      }
    });
    for (let a = 1; a < w.length; a++) {
      gradient[a] = (gradient[a] as number) - ridge * (w[a] as number);
      hessian.set(a, a, hessian.get(a, a) + ridge);
    }
    const step = solve(hessian, Matrix.columnVector(gradient)).getColumn(0);
    w = w.map((v, k) => v + Math.max(-2, Math.min(2, step[k] as number)));
  }
  const constant =
    (w[0] as number) -
    names.reduce((a, _, k) => a + ((w[k + 1] as number) * (mean[k] as number)) / (spread[k] as number), 0);
  return { constant, ...Object.fromEntries(names.map((n, k) => [n, (w[k + 1] as number) / (spread[k] as number)])) };
}

const probability = (features: Weights, w: Weights) =>
  1 / (1 + Math.exp(-Object.entries(features).reduce((a, [n, v]) => a + (w[n] ?? 0) * v, w.constant ?? 0)));

const FOLDS = 6;
const RIDGE_CHOICE = 4;
const RIDGE_ACCEPTANCE = 6;

/** Values beside `--name`, and the arguments that belong to no option. */
function argumentsOf(list: readonly string[]): { folders: string[]; option: (name: string) => string | undefined } {
  const folders: string[] = [];
  for (let i = 0; i < list.length; i++) {
    if (list[i] === '--keep' || list[i] === '--from') i += 1;
    else if (!(list[i] as string).startsWith('--')) folders.push(list[i] as string);
  }
  return { folders, option: (name) => (list.includes(name) ? list[list.indexOf(name) + 1] : undefined) };
}

const { folders, option } = argumentsOf(process.argv.slice(2));
const from = option('--from');
const samples: Sample[] = from === undefined ? [] : (JSON.parse(await readFile(from, 'utf8')) as Sample[]);
for (const folder of folders) samples.push(...(await samplesOf(folder)));
const keep = option('--keep');
if (keep !== undefined) await writeFile(keep, JSON.stringify(samples));

const byPhoto = new Map<string, Sample[]>();
for (const s of samples) byPhoto.set(s.photo, [...(byPhoto.get(s.photo) ?? []), s]);
const photos = [...byPhoto.values()];
const scale = scaleOf(samples);
const chosen: Chosen[] = [];
for (let fold = 0; fold < FOLDS; fold++) {
  const w = fitChoice(
    photos.filter((_, i) => i % FOLDS !== fold),
    scale,
    RIDGE_CHOICE,
  );
  chosen.push(...photos.filter((_, i) => i % FOLDS === fold).map((p) => choose(p, w)));
}
console.log(
  `choice: right on ${chosen.filter((c) => c.right).length} of ${chosen.filter((c) => c.possible).length} photos that have a right reading (${photos.length} photos)`,
);
const judged: { right: boolean; p: number; photo: string }[] = [];
for (let fold = 0; fold < FOLDS; fold++) {
  const w = fitLogistic(
    chosen.filter((_, i) => i % FOLDS !== fold),
    RIDGE_ACCEPTANCE,
  );
  judged.push(
    ...chosen
      .filter((_, i) => i % FOLDS === fold)
      .map((c) => ({ right: c.right, p: probability(c.features, w), photo: c.photo })),
  );
}
for (const limit of [0.3, 0.4, 0.5, 0.6, 0.7, 0.8]) {
  const given = judged.filter((j) => j.p >= limit);
  console.log(`given at ${limit}: ${given.length}, of them right ${given.filter((j) => j.right).length}`);
}
console.log(
  `wrong at 0.5: ${judged
    .filter((j) => j.p >= 0.5 && !j.right)
    .map((j) => `${j.photo.split('/').slice(-2).join('/')} ${j.p.toFixed(2)}`)
    .join(', ')}`,
);

const rounded = (w: Weights): Weights =>
  Object.fromEntries(Object.entries(w).map(([n, v]) => [n, Math.round(v * 1000) / 1000]));
const choice = fitChoice(photos, scale, RIDGE_CHOICE);
const partOf = (view: string) =>
  rounded(
    Object.fromEntries(
      Object.entries(choice)
        .filter(([n]) => n.startsWith(`${view}.`))
        .map(([n, v]) => [n.slice(view.length + 1), v]),
    ),
  );
const weights = { pair: partOf('pair'), half: partOf('half') };
const accept = rounded(fitLogistic(chosen, RIDGE_ACCEPTANCE));
console.log(JSON.stringify({ weights, accept }, null, 1));
if (process.argv.includes('--write')) {
  const place = new URL('../../../src/photo/choiceWeights.ts', import.meta.url);
  await writeFile(
    place,
    `// Written by test/bench/photos/learnChoice.ts from ${photos.length} rendered photos; see there for the method.

/** Weights of the features by which readings of a photo are compared (conditional logit): change of log odds a unit. */
export const CHOICE_WEIGHTS: Readonly<Record<'pair' | 'half', Readonly<Record<string, number>>>> = ${JSON.stringify(weights, null, 2)};

/** Weights of the logistic regression that says whether the best reading is right. */
export const ACCEPTANCE_WEIGHTS: Readonly<Record<string, number>> = ${JSON.stringify(accept, null, 2)};
`,
  );
}
