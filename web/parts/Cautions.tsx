import { CAUTIONS } from '../texts/common.ts';

/** The cautions that stand on every sheet. */
export function Cautions() {
  return (
    <section className="panel cautions" aria-labelledby="cautions-title">
      <h2 id="cautions-title">{CAUTIONS.title}</h2>
      <ul>
        {CAUTIONS.sentences.map((sentence) => (
          <li key={sentence}>{sentence}</li>
        ))}
      </ul>
    </section>
  );
}
