import { Fragment } from 'react';
import { State } from '@/app/ui/State';
import type { AnswerOf } from '@/openapi/contract';
import type * as contracts from '@/openapi/contracts/control';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Preview } from './readPreview';
import { sayProblem } from './rowWords';

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
        className={`overflow-auto ${answered ? '' : 'max-h-[28rem]'}`}
        // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by keyboard.
        tabIndex={0}
        aria-label={`Rows of ${preview.name}`}
      >
        <table className="w-full border-collapse">
          <caption className="sr-only">What {preview.name} holds</caption>
          <thead>
            <tr>
              <th scope="col" className={heads}>
                Row
              </th>
              {preview.header.map((name) => (
                <th key={name} scope="col" className={heads}>
                  {name}
                </th>
              ))}
              {answered ? (
                <th scope="col" className={`max-md:hidden ${heads}`}>
                  Outcome
                </th>
              ) : null}
            </tr>
          </thead>
          <tbody>
            {sorted.slice(0, MOST_SHOWN).map(({ line, cells }) => {
              const problems = problemsOf(line);
              const outcome = answered ? (
                <RowOutcome point={outcomes.get(`/rows/${line}`)} problems={problems} />
              ) : null;
              const soft = problems.length > 0 ? 'bg-fail-soft' : '';
              const cell = `py-2 pr-3 ${answered ? 'border-rule md:border-b' : 'border-b border-rule'}`;
              return (
                <Fragment key={line}>
                  <tr className={soft}>
                    <td className={`text-ink-third ${cell}`}>{line}</td>
                    {preview.header.map((name, i) => (
                      <td key={name} className={cell}>
                        {cells[i] ?? ''}
                      </td>
                    ))}
                    {answered ? <td className={`max-md:hidden ${cell}`}>{outcome}</td> : null}
                  </tr>
                  {answered ? (
                    <tr className={`md:hidden ${soft}`}>
                      <td colSpan={preview.header.length + 1} className="border-b border-rule pr-3 pb-2.5">
                        {outcome}
                      </td>
                    </tr>
                  ) : null}
                </Fragment>
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

function RowOutcome({
  point,
  problems,
}: {
  point: Receipt['points'][number] | undefined;
  problems: readonly ProblemItem[];
}) {
  if (problems.length > 0) {
    return (
      <>
        <State tone="fail">refused</State>
        {problems.map((problem) => (
          <span key={`${problem.pointer}${problem.code}`} className="block text-[13.5px]">
            {sayProblem(problem)}
          </span>
        ))}
      </>
    );
  }
  return point ? <State tone="pass">{`${point.outcome}, version ${point.version}`}</State> : null;
}
