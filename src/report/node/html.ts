import { escapeXml } from '../../figures/svgText.ts';
import type { Fact } from '../summary.ts';
import type { PrintedTest } from './pdf.ts';

const facts = (title: string, rows: readonly Fact[]): string =>
  rows.length === 0
    ? ''
    : `<h2>${title}</h2><table>${rows.map((r) => `<tr><th scope="row">${escapeXml(r.label)}</th><td>${escapeXml(r.value)}</td></tr>`).join('')}</table>`;

const list = (title: string, items: readonly string[]): string =>
  items.length === 0 ? '' : `<h2>${title}</h2><ul>${items.map((i) => `<li>${escapeXml(i)}</li>`).join('')}</ul>`;

const STYLE = `body{font:15px/1.45 "DejaVu Sans",system-ui,sans-serif;color:#17222e;max-width:60rem;margin:2rem auto;padding:0 1rem}
h1{font-size:1.5rem}h2{font-size:1.05rem;margin:1.2rem 0 .3rem;color:#1d3a5f}table{border-collapse:collapse}th,td{text-align:left;padding:.15rem 1rem .15rem 0;vertical-align:top;font-weight:400}th{color:#4b5b6b}
.headline{background:#eef1f4;border-left:4px solid #1d3a5f;padding:.6rem 1rem}.headline b{font-size:1.25rem}img,svg{max-width:100%;height:auto}.small{color:#4b5b6b;font-size:.85rem}article+article{page-break-before:always}`;

/** One file with everything in it: opens anywhere, prints, can be mailed. No scripts. */
export function htmlOf(tests: readonly PrintedTest[], madeAt: Date): string {
  const articles = tests.map(({ summary: s, photoJpeg }) => {
    const photo =
      photoJpeg === null || s.photo === null
        ? ''
        : `<figure><img alt="${escapeXml(s.photo.caption)}" src="data:image/jpeg;base64,${Buffer.from(photoJpeg).toString('base64')}"><figcaption class="small">${escapeXml(s.photo.caption)}</figcaption></figure>`;
    const planes = `<h2>Predicted planes</h2><table><tr><th>plane</th><th>θ</th><th>σn</th><th>τnt</th></tr>${s.planes
      .map((p) => `<tr><td>${escapeXml(p.plane)}</td><td>${p.angle}</td><td>${p.normal}</td><td>${p.shear}</td></tr>`)
      .join('')}</table>`;
    return `<article><h1>${escapeXml(s.title)}</h1><p class="headline"><b>${escapeXml(s.headline)}</b> ${escapeXml(s.headlineDetail)}${
      s.reason === null ? '' : `<br>${escapeXml(s.reason)}`
    }</p>${photo}${facts('Specimen', s.specimen)}${facts('Loads', s.loads)}${facts('Measured break', s.reading)}${s.figureSvg}${facts('Stresses', s.stresses)}${planes}${facts(
      'Probability of each mode',
      s.probabilities.map((p) => ({ label: p.mode, value: p.probability })),
    )}${list(
      'Evidence',
      s.evidence.map((e) => `${e.sign}: ${e.sentence}`),
    )}${list('Assumed or missing', s.notes)}${
      s.remarks === null ? '' : `<h2>Remarks</h2><p>${escapeXml(s.remarks)}</p>`
    }${facts(
      'Uncertainty of the plane angle',
      s.budget.map((b) => ({ label: `${b.component} (${b.evaluation})`, value: `${b.u}, ${b.explanation}` })),
    )}${
      s.rule === null ? '' : `<p class="small">Declared rule. ${escapeXml(s.rule)}</p>`
    }${list('Cautions', s.cautions)}</article>`;
  });
  const first = tests[0]?.summary;
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>${escapeXml(first?.title ?? 'Failure mode')}</title><style>${STYLE}</style></head><body>${articles.join('')}<p class="small">${escapeXml(first?.program ?? '')}, made ${madeAt.toISOString()}</p></body></html>\n`;
}
