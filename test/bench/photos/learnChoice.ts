/**
 * Fits the weights with which the measurement chooses between the ways to read a photo (src/photo/choice.ts): logistic
 * regression, ridge, on rendered photos with truth. Usage: tsx test/bench/photos/learnChoice.ts FOLDER… [--write]
 * Photos whose number is divisible by four are held back to check the fit.
 */
import { readFile, writeFile } from 'node:fs/promises';
import { Matrix, solve } from 'ml-matrix';
import { planeAngleDistanceDeg } from '../../../src/angle.ts';
import { findCandidates, findHalves } from '../../../src/photo/candidates.ts';
import { type PhotoReading, readAsHalf, readAsPair } from '../../../src/photo/choice.ts';
import { openPhoto } from '../../../src/photo/node/decode.ts';
import { frameFromAxis, type SpecimenFrame, toPhoto } from '../../../src/photo/unroll.ts';
import { readPhotoSet } from './truth.ts';

interface Sample {
  readonly photo: string;
  readonly held: boolean;
  readonly view: 'pair' | 'half';
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

/** Right: the specimen's own edges, a trace that keeps to the true one, and an angle within 4° of the true one. */
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
  return share > 0.5 && reading.fit !== null && planeAngleDistanceDeg(reading.fit.planeAngleDeg, trueDeg) < 4;
}

async function samplesOf(folder: string): Promise<Sample[]> {
  const samples: Sample[] = [];
  for (const [number, photo] of (await readPhotoSet(folder)).entries()) {
    const opened = await openPhoto(await readFile(photo.path));
    if (opened.outcome !== 'open') continue;
    const picture = await opened.photo.whole(1600);
    const truth = JSON.parse(await readFile(photo.path.replace(/\.\w+$/, '.json'), 'utf8')) as Geometry;
    const candidates = findCandidates(picture);
    const readings = [
      ...candidates.map(readAsPair),
      ...findHalves(picture, candidates).flatMap((half) => half.rims.map((end) => readAsHalf(half, end))),
    ].filter((r): r is PhotoReading => r !== null);
    const sample = readings.map((r) => ({
      photo: `${folder}/${photo.file}`,
      held: number % 4 === 0,
      view: r.view,
      features: r.features,
      right:
        photo.truth.kind !== 'none' &&
        isRight(
          r,
          { ...truth, trueDeg: photo.truth.kind === 'mixed' ? null : photo.truth.visibleFrontThetaDeg },
          photo.truth.view,
          picture.scale,
        ),
    }));
    samples.push(...sample);
    process.stderr.write(
      `${photo.file} ${photo.truth.view ?? ''} ${sample.filter((s) => s.right).length} right of ${sample.length}\n`,
    );
  }
  return samples;
}

/** Newton's iterations for the penalised likelihood; features are standardised inside, weights returned in their own units. */
function fitLogistic(samples: readonly Sample[], ridge: number): Record<string, number> {
  const names = [...new Set(samples.flatMap((s) => Object.keys(s.features)))].sort();
  const mean = names.map((n) => samples.reduce((a, s) => a + (s.features[n] ?? 0), 0) / samples.length);
  const spread = names.map((n, k) =>
    Math.max(
      1e-6,
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
  const out: Record<string, number> = {
    constant:
      (w[0] as number) -
      names.reduce((a, _, k) => a + ((w[k + 1] as number) * (mean[k] as number)) / (spread[k] as number), 0),
  };
  names.forEach((n, k) => {
    out[n] = (w[k + 1] as number) / (spread[k] as number);
  });
  return Object.fromEntries(Object.entries(out).map(([n, v]) => [n, Math.round(v * 1000) / 1000]));
}

function report(label: string, samples: readonly Sample[], weights: Record<string, Record<string, number>>): void {
  const value = (s: Sample) => {
    const w = weights[s.view] ?? {};
    return (
      1 /
      (1 + Math.exp(-((w.constant ?? 0) + Object.entries(s.features).reduce((a, [n, v]) => a + (w[n] ?? 0) * v, 0))))
    );
  };
  const photos = new Map<string, Sample[]>();
  for (const s of samples) photos.set(s.photo, [...(photos.get(s.photo) ?? []), s]);
  for (const limit of [0.3, 0.5, 0.7]) {
    let rightChoice = 0;
    let wrong = 0;
    let silent = 0;
    let possible = 0;
    const worst: string[] = [];
    for (const [photo, list] of photos) {
      const best = list.reduce((a, b) => (value(b) > value(a) ? b : a));
      if (list.some((s) => s.right)) possible += 1;
      if (value(best) < limit) silent += 1;
      else if (best.right) rightChoice += 1;
      else {
        wrong += 1;
        worst.push(
          `${photo.split('/').pop()} ${best.view} ${value(best).toFixed(2)}${list.some((s) => s.right) ? ' (right one had ' + Math.max(...list.filter((s) => s.right).map(value)).toFixed(2) + ')' : ''}`,
        );
      }
    }
    console.log(
      `${label} limit ${limit}: ${photos.size} photos, ${possible} with a right reading; chosen right ${rightChoice}, wrong ${wrong}, silent ${silent}`,
    );
    if (limit === 0.5) console.log(`   wrong: ${worst.join('; ')}`);
  }
}

const folders = process.argv.slice(2).filter((a) => !a.startsWith('--'));
const samples: Sample[] = [];
for (const folder of folders) samples.push(...(await samplesOf(folder)));
const learn = samples.filter((s) => !s.held);
const weights = {
  pair: fitLogistic(
    learn.filter((s) => s.view === 'pair'),
    3,
  ),
  half: fitLogistic(
    learn.filter((s) => s.view === 'half'),
    3,
  ),
};
report('fitted on', learn, weights);
report(
  'held back',
  samples.filter((s) => s.held),
  weights,
);
console.log(JSON.stringify(weights, null, 1));
if (process.argv.includes('--dump')) await writeFile('.tmp-samples.json', JSON.stringify(samples));
if (process.argv.includes('--write')) {
  const place = new URL('../../../src/photo/choiceWeights.ts', import.meta.url);
  const text = await readFile(place, 'utf8');
  const start = text.indexOf('export const');
  await writeFile(
    place,
    `${text.slice(0, start)}export const CHOICE_WEIGHTS: Readonly<Record<'pair' | 'half', Readonly<Record<string, number>>>> = ${JSON.stringify(weights, null, 2)};\n`,
  );
}
