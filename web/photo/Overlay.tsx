import type { Mark } from './overlay.ts';
import { pathData } from './overlay.ts';

/** Draws marks, each on a dark casing so that it stands out on bright and on dark specimens. */
export function Overlay({ marks }: { readonly marks: readonly Mark[] }) {
  const named = marks.map((mark, index) => ({
    key: `${mark.name}-${index}`,
    name: mark.name,
    d: pathData(mark.points),
  }));
  return (
    <g className="marks">
      {named.map(({ key, d }) => (
        <path key={key} className="mark-casing" d={d} />
      ))}
      {named.map(({ key, name, d }) => (
        <path key={key} className={`mark-${name}`} d={d} />
      ))}
    </g>
  );
}
