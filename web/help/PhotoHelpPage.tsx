import { Cautions } from '../parts/Cautions.tsx';
import { HOW_TO_PHOTOGRAPH } from '../texts/photo.ts';
import { ChalkDrawing, FramingDrawing } from './drawings.tsx';

/** How to photograph a break, and the chalk rule for the direction of the torque. */
export function PhotoHelpPage() {
  const { title, lead, steps, second, chalkTitle, chalk } = HOW_TO_PHOTOGRAPH;
  return (
    <article className="help-page">
      <h1>{title}</h1>
      <p className="lead">{lead}</p>
      <FramingDrawing />
      <ol className="steps">
        {steps.map((step) => (
          <li key={step.title}>
            <h2>{step.title}</h2>
            <p>{step.text}</p>
          </li>
        ))}
      </ol>
      <p>{second}</p>
      <section className="panel chalk">
        <h2>{chalkTitle}</h2>
        <ChalkDrawing />
        <ul>
          {chalk.map((sentence) => (
            <li key={sentence}>{sentence}</li>
          ))}
        </ul>
      </section>
      <Cautions />
    </article>
  );
}
