import { DRAWING } from '../texts/drawings.ts';

/** The frame of a good photo: side view, two diameters on each side of the break, a small gap. */
export function FramingDrawing() {
  return (
    <svg className="drawing" viewBox="0 0 640 220" role="img" aria-label={DRAWING.framing}>
      <rect className="drawing-frame" x="20" y="14" width="600" height="192" rx="6" />
      <path className="drawing-axis" d="M44 110H596" />
      <path className="drawing-specimen" d="M70 70H300L250 150H70Z" />
      <path className="drawing-specimen" d="M570 150H268L318 70H570Z" />
      <path className="drawing-trace" d="M309 70L259 150" />
      <path className="drawing-measure" d="M124 176H244M124 170V182M244 170V182M324 176H444M324 170V182M444 170V182" />
      <text x="184" y="196" textAnchor="middle">
        2 D
      </text>
      <text x="384" y="196" textAnchor="middle">
        2 D
      </text>
      <path className="drawing-measure" d="M50 70V150M44 70H56M44 150H56" />
      <text x="34" y="115" textAnchor="middle">
        D
      </text>
      <text x="340" y="58" textAnchor="middle">
        {DRAWING.trace}
      </text>
      <text x="540" y="104" textAnchor="middle">
        {DRAWING.axis}
      </text>
    </svg>
  );
}

/** A bar lying across, its right end turned counter-clockwise as one faces that end; the break leans "/". */
export function ChalkDrawing() {
  return (
    <svg className="drawing" viewBox="0 0 640 200" role="img" aria-label={DRAWING.chalk}>
      <path className="drawing-specimen" d="M70 70H330L270 150H70Z" />
      <path className="drawing-specimen" d="M500 150H284L344 70H500Z" />
      <ellipse className="drawing-end" cx="500" cy="110" rx="16" ry="40" />
      <path className="drawing-trace" d="M337 70L277 150" />
      <path className="drawing-axis" d="M44 110H560" />
      <path className="drawing-turn" d="M548 140A22 38 0 1 0 536 78" />
      <path className="drawing-arrow" d="M527 84L540 74L541 90Z" />
      <text x="307" y="56" textAnchor="middle">
        {DRAWING.leans}
      </text>
      <text x="600" y="100" textAnchor="middle">
        {DRAWING.ccw[0]}
      </text>
      <text x="600" y="118" textAnchor="middle">
        {DRAWING.ccw[1]}
      </text>
    </svg>
  );
}
