import type { Evidence } from '../../src/verdict/model.ts';
import { EVIDENCE_SIGN } from '../texts/modes.ts';
import { STATEMENT } from '../texts/statement.ts';

const SIGN_MARK = { supports: '+', neutral: '·', contradicts: '!' } as const;

/** What agrees and what disagrees with the statement; a sign that does not rest on colour alone. */
export function EvidenceList({ evidence }: { readonly evidence: readonly Evidence[] }) {
  return (
    <div className="evidence">
      <h3>{STATEMENT.evidence}</h3>
      <ul>
        {evidence.map(({ code, sign, sentence }) => (
          <li key={code + sentence} className={`evidence-${sign}`}>
            <span className="evidence-mark" aria-hidden="true">
              {SIGN_MARK[sign]}
            </span>
            <span>
              <strong>{EVIDENCE_SIGN[sign]}:</strong> {sentence}
            </span>
          </li>
        ))}
      </ul>
    </div>
  );
}
