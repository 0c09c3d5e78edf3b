import type { BudgetLine, PlaneReading, Warning } from '../../src/records/reading.ts';
import type { Assessment } from '../../src/verdict/model.ts';
import { percentText } from '../../src/verdict/wording.ts';
import { angleWithUncertainty } from '../format/uncertainty.ts';
import { HAND, MODE, MODE_SHORT, SHAPE } from '../texts/modes.ts';
import { STATEMENT } from '../texts/statement.ts';
import { BudgetTable } from './BudgetTable.tsx';
import { EvidenceList } from './EvidenceList.tsx';
import { ModeProbabilities } from './ModeProbabilities.tsx';

/** The reading a statement rests on, as far as the panel shows it. */
export type ShownReading = PlaneReading & {
  readonly budget?: readonly BudgetLine[] | undefined;
  readonly warnings?: readonly Warning[] | undefined;
};

interface StatementPanelProps {
  /** Null while the geometry is not valid. */
  readonly assessment: Assessment | null;
  readonly reading: ShownReading | null;
  /** True while it follows a trace that is being dragged and is not stored. */
  readonly provisional: boolean;
}

/** What broke the specimen, how sure that is, and why. */
export function StatementPanel({ assessment, reading, provisional }: StatementPanelProps) {
  const statement = assessment?.statement ?? null;
  return (
    <section className={`panel statement ${provisional ? 'provisional' : ''}`} aria-labelledby="statement-title">
      <h2 id="statement-title">{STATEMENT.title}</h2>
      {provisional && <p className="provisional-note">{STATEMENT.provisional}</p>}
      <div aria-live="polite" aria-atomic="true">
        {statement === null ? (
          <Headline
            mode="none"
            title={STATEMENT.noReading}
            detail={assessment === null ? STATEMENT.noGeometry : STATEMENT.noReadingDetail}
          />
        ) : (
          <Headline
            mode={statement.mode}
            title={MODE[statement.mode]}
            detail={
              statement.mode === 'indeterminate'
                ? STATEMENT.likeliest(MODE_SHORT[statement.likeliestMode], percentText(statement.probability))
                : STATEMENT.probability(percentText(statement.probability))
            }
          />
        )}
        {reading !== null && <ReadingNumbers reading={reading} />}
      </div>
      {statement?.reason && <p className="reason">{statement.reason.message}</p>}
      {statement !== null && <ModeProbabilities statement={statement} />}
      {statement !== null && statement.evidence.length > 0 && <EvidenceList evidence={statement.evidence} />}
      {reading?.warnings && reading.warnings.length > 0 && (
        <SentenceList title={STATEMENT.warnings} sentences={reading.warnings.map(({ message }) => message)} />
      )}
      {assessment !== null && assessment.notes.length > 0 && (
        <SentenceList title={STATEMENT.notes} sentences={assessment.notes} />
      )}
      {reading?.budget && reading.budget.length > 0 && <BudgetTable budget={reading.budget} />}
      {statement !== null && (
        <p className="rule">
          <strong>{STATEMENT.rule}.</strong> {STATEMENT.compared[statement.comparedQuantity]} {statement.ruleText}
        </p>
      )}
      <p className="proposal">{STATEMENT.proposal}</p>
    </section>
  );
}

function Headline({ mode, title, detail }: { readonly mode: string; readonly title: string; readonly detail: string }) {
  return (
    <p className={`headline mode-${mode}`}>
      <span className="headline-mode">{title}</span>
      <span className="headline-detail">{detail}</span>
    </p>
  );
}

function ReadingNumbers({ reading }: { readonly reading: ShownReading }) {
  const { planeTiltDeg, planeTiltExpandedUncertaintyDeg, segments } = reading;
  return (
    <dl className="numbers">
      <div className="number-main">
        <dt>{STATEMENT.planeAngle}</dt>
        <dd>
          <output data-testid="plane-angle">
            {angleWithUncertainty(reading.planeAngleDeg, reading.expandedUncertaintyDeg)}
          </output>
          <span className="coverage">{STATEMENT.coverage(String(reading.coverageFactor))}</span>
        </dd>
      </div>
      {planeTiltDeg !== null && (
        <div className="number-main">
          <dt>{STATEMENT.tilt}</dt>
          <dd>
            {angleWithUncertainty(planeTiltDeg, planeTiltExpandedUncertaintyDeg ?? reading.expandedUncertaintyDeg)}
          </dd>
        </div>
      )}
      <div>
        <dt>{STATEMENT.hand}</dt>
        <dd>{HAND[reading.hand]}</dd>
      </div>
      <div>
        <dt>{STATEMENT.shape}</dt>
        <dd>{SHAPE[reading.shape]}</dd>
      </div>
      {segments.length > 1 && (
        <div>
          <dt>{STATEMENT.segments}</dt>
          <dd>
            {segments
              .map(({ planeAngleDeg, share, expandedUncertaintyDeg, closingStep }) =>
                STATEMENT.segment(
                  angleOfSegment(planeAngleDeg, expandedUncertaintyDeg),
                  percentText(share),
                  closingStep === true,
                ),
              )
              .join('; ')}
          </dd>
        </div>
      )}
    </dl>
  );
}

const angleOfSegment = (planeAngleDeg: number, expandedUncertaintyDeg: number | undefined): string =>
  expandedUncertaintyDeg === undefined
    ? `${planeAngleDeg.toFixed(1)}°`
    : angleWithUncertainty(planeAngleDeg, expandedUncertaintyDeg);

function SentenceList({ title, sentences }: { readonly title: string; readonly sentences: readonly string[] }) {
  return (
    <div className="sentences">
      <h3>{title}</h3>
      <ul>
        {sentences.map((sentence) => (
          <li key={sentence}>{sentence}</li>
        ))}
      </ul>
    </div>
  );
}
