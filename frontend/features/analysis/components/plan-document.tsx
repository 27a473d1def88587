import { planLines, planTitle } from '../model/plan-words.ts';

/** A plan as a document to read, whether it is complete yet or not. */
export function PlanDocument({ content }: { content: unknown }) {
  return (
    <article>
      <h3 className="mb-3 text-lg text-soot">{planTitle(content)}</h3>
      <dl className="flex max-w-prose flex-col gap-3">
        {planLines(content).map(({ heading, words }) => (
          <div key={heading}>
            <dt className="text-sm font-medium text-ink-soft">{heading}</dt>
            <dd className="whitespace-pre-wrap">{words}</dd>
          </div>
        ))}
      </dl>
    </article>
  );
}
