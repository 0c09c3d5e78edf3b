import type { Assessment } from '../../src/verdict/model.ts';
import type { ShownReading } from './StatementPanel.tsx';

interface FigurePanelProps {
  readonly assessment: Assessment | null;
  readonly reading: ShownReading | null;
}

export function FigurePanel(_: FigurePanelProps) {
  return null;
}
