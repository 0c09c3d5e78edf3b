import { useEffect, useMemo, useRef } from 'react';
import { planeFigure } from '../../src/figures/planeFigure.ts';
import type { Assessment } from '../../src/verdict/model.ts';
import type { ShownReading } from './StatementPanel.tsx';

interface FigurePanelProps {
  readonly assessment: Assessment | null;
  readonly reading: ShownReading | null;
}

/** The figure of the documents, live: stresses on every plane, the predicted planes, the measured angle. */
export function FigurePanel({ assessment, reading }: FigurePanelProps) {
  const place = useRef<HTMLDivElement>(null);
  const svg = useMemo(() => (assessment === null ? null : planeFigure(assessment, reading)), [assessment, reading]);
  useEffect(() => {
    if (place.current === null) return;
    if (svg === null) {
      place.current.replaceChildren();
      return;
    }
    // Parsed as XML, so it is a drawing and nothing else; the policy of the page forbids scripts in it anyway.
    const parsed = new DOMParser().parseFromString(svg, 'image/svg+xml').documentElement;
    place.current.replaceChildren(document.importNode(parsed, true));
  }, [svg]);
  return assessment === null ? null : <div ref={place} className="plane-figure" />;
}
