import { PHOTO } from '../texts/photo.ts';
import type { Mark } from './overlay.ts';

/** Which line is which; a sample of each line beside its word. */
export function Legend({ names }: { readonly names: readonly Mark['name'][] }) {
  return (
    <ul className="legend">
      {names.map((name) => (
        <li key={name}>
          <svg width="30" height="10" aria-hidden="true">
            <path className="mark-casing" d="M1 5H29" />
            <path className={`mark-${name}`} d="M1 5H29" />
          </svg>
          {PHOTO.legend[name]}
        </li>
      ))}
    </ul>
  );
}
