import { State } from '@/app/ui/State';
import type { AnswerOf } from '@/openapi/contract';
import type * as contracts from '@/openapi/contracts/control';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Preview } from './readPreview';

type Receipt = AnswerOf<typeof contracts.createControlPoints>;

/** Rows shown at once; those that were refused are always among them. */
const MOST_SHOWN = 100;

/** The file's own rows and, once they were posted, what became of each. */
export function PreviewTable({
  preview,
  receipt,
  refused,
}: {
  preview: Preview;
  receipt: Receipt | null;
  refused: readonly ProblemItem[];
}) {
  const answered = receipt !== null || refused.length > 0;
  const outcomes = new Map(receipt?.points.map((point) => [point.pointer, point]));
  const problemsOf = (line: number) =>
    refused.filter(({ pointer }) => pointer === `/rows/${line}` || pointer.startsWith(`/rows/${line}/`));
  const sorted = answered
    ? [...preview.rows].sort(
        (a, b) => problemsOf(b.line).length - problemsOf(a.line).length || a.line - b.line,
      )
    : preview.rows;
  const heads =
    'border-b-[1.5px] border-rule-strong pr-3 pb-2 text-left font-head text-[13px] text-ink-second';
  return (
    <div>
      <section
        className="max-h-[28rem] overflow-auto"
        // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by keyboard.
        tabIndex={0}
        aria-label={`Rows of ${preview.name}`}
      >
        <table className="w-full border-collapse">
          <caption className="sr-only">What {preview.name} holds</caption>
          <thead>
            <tr>
              <th scope="col" className={heads}>
                Line
              </th>
              {preview.header.map((name) => (
                <th key={name} scope="col" className={heads}>
                  {name}
                </th>
              ))}
              {answered ? (
                <th scope="col" className={heads}>
                  Outcome
                </th>
              ) : null}
            </tr>
          </thead>
          <tbody>
            {sorted.slice(0, MOST_SHOWN).map(({ line, cells }) => {
              const problems = problemsOf(line);
              const outcome = outcomes.get(`/rows/${line}`);
              return (
                <tr key={line} className={problems.length > 0 ? 'bg-fail-soft' : undefined}>
                  <td className="border-b border-rule py-2 pr-3 text-ink-third">{line}</td>
                  {preview.header.map((name, i) => (
                    <td key={name} className="border-b border-rule py-2 pr-3">
                      {cells[i] ?? ''}
                    </td>
                  ))}
                  {answered ? (
                    <td className="border-b border-rule py-2 pr-3">
                      {problems.length > 0 ? (
                        <>
                          <State tone="fail">refused</State>
                          {problems.map((problem) => (
                            <span key={`${problem.pointer}${problem.code}`} className="block text-[13.5px]">
                              {problem.detail} {problem.fix}
                            </span>
                          ))}
                        </>
                      ) : outcome ? (
                        <State tone="pass">{`${outcome.outcome}, version ${outcome.version}`}</State>
                      ) : null}
                    </td>
                  ) : null}
                </tr>
              );
            })}
          </tbody>
        </table>
      </section>
      <p className="mt-2 text-[13.5px] text-ink-second">
        {preview.name}, {preview.rows.length} {preview.rows.length === 1 ? 'row' : 'rows'}
        {preview.rows.length > MOST_SHOWN ? `; ${MOST_SHOWN} of them shown` : ''}
      </p>
    </div>
  );
}
