/** Text of figures: every figure is made of these, so that nothing a user wrote can become markup. */

/** Text as XML character data and attribute value; control characters XML cannot hold are left out. */
export function escapeXml(text: string): string {
  return [...text]
    .filter((c) => c >= ' ' || c === '\t' || c === '\n')
    .join('')
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;');
}

/** A coordinate of a figure: two decimals are finer than any printer. */
export const px = (value: number): string => String(Math.round(value * 100) / 100);

/** An element with its attributes; content is markup made by these functions, or escaped text. */
export function element(name: string, attributes: Readonly<Record<string, string | number>>, content = ''): string {
  const list = Object.entries(attributes)
    .map(([key, value]) => ` ${key}="${typeof value === 'number' ? px(value) : escapeXml(value)}"`)
    .join('');
  return content === '' ? `<${name}${list}/>` : `<${name}${list}>${content}</${name}>`;
}

/** Fonts a figure asks for: the one documents embed, then what a browser has. */
export const FIGURE_FONT = 'DejaVu Sans, system-ui, sans-serif';
