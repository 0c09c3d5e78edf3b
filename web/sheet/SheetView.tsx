import { useState } from 'react';
import { readSheet } from '../api/laboratory.ts';
import type { TestSheet } from '../api/types.ts';
import { Cautions } from '../parts/Cautions.tsx';
import { useLeaveGuard } from '../parts/useLeaveGuard.ts';
import { PhotoSection } from '../photo/PhotoSection.tsx';
import { useCorrection } from '../photo/useCorrection.ts';
import { STRESSES } from '../texts/statement.ts';
import { FigurePanel } from './FigurePanel.tsx';
import { InstrumentForm } from './InstrumentForm.tsx';
import { ReadingsPanel } from './ReadingsPanel.tsx';
import { SheetHeader } from './SheetHeader.tsx';
import { StatementPanel } from './StatementPanel.tsx';
import { StressPanel } from './StressPanel.tsx';
import { TestPanel } from './TestPanel.tsx';
import { useLiveAssessment } from './useLiveAssessment.ts';
import { useTestDraft } from './useTestDraft.ts';

interface SheetViewProps {
  readonly sheet: TestSheet;
  readonly onSheet: (sheet: TestSheet) => void;
}

/** One test: photo and statement side by side, form and figure below them, all answering at once. */
export function SheetView({ sheet, onSheet }: SheetViewProps) {
  const { test, photos, readings } = sheet;
  const form = useTestDraft(test);
  const correction = useCorrection();
  const [announced, setAnnounced] = useState('');
  const { assessment, reading, provisional } = useLiveAssessment(form.computable, readings, correction.open);
  useLeaveGuard(form.dirty || (correction.open !== null && correction.open.correction.past.length > 0));

  const readAgain = async () => onSheet(await readSheet(test.id));

  return (
    <article className="sheet">
      <SheetHeader test={test} />
      <p className="visually-hidden" role="status">
        {announced}
      </p>
      <div className="sheet-grid">
        <PhotoSection
          testId={test.id}
          photos={photos}
          readings={readings}
          governingId={sheet.assessment.readingId}
          correction={correction}
          onAnswer={(answer) => onSheet({ ...sheet, ...answer })}
          onSaved={async (message) => {
            await readAgain();
            setAnnounced(message);
          }}
        />
        <StatementPanel assessment={assessment} reading={reading} provisional={provisional} />
        <section className="panel analysis" aria-labelledby="stresses-title">
          <h2 id="stresses-title">{STRESSES.title}</h2>
          <FigurePanel assessment={assessment} reading={reading} />
          <StressPanel assessment={assessment} />
        </section>
        <TestPanel test={test} form={form} onSaved={onSheet} />
        <ReadingsPanel
          readings={readings}
          governingId={sheet.assessment.readingId}
          onChanged={() => void readAgain()}
        />
        <InstrumentForm testId={test.id} onAdded={() => void readAgain()} />
        <Cautions />
      </div>
    </article>
  );
}
