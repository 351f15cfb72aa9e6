import type { ShownSetup } from './SetupSheet';

/** What would explain residuals that do not fit, with its share of the belief and the shot that would settle it. */
export function Explanations({ setup: { explanations } }: { setup: ShownSetup }) {
  const nothingWrong = explanations.length === 1 && explanations[0].fault === 'none';
  if (nothingWrong) return null;
  return (
    <section>
      <h2 className="mb-1 font-head text-[19px]">What would explain it</h2>
      <ol>
        {explanations
          .filter(({ weight }) => weight >= 0.01)
          .map(({ fault, subject, weight, text, confirm }) => (
            <li
              key={`${fault}${subject}`}
              className="grid grid-cols-[3.2rem_minmax(0,1fr)] gap-x-4 border-b border-rule py-3"
            >
              <p className="text-right font-semibold">{percent(weight)}</p>
              <div>
                <p className="font-semibold">{text}</p>
                <p className="text-ink-second">To settle it: {confirm}</p>
                <div aria-hidden className="mt-2 h-1 bg-rule">
                  <div className="h-1 bg-ink-second" style={{ width: `${100 * weight}%` }} />
                </div>
              </div>
            </li>
          ))}
      </ol>
    </section>
  );
}

function percent(weight: number): string {
  return weight > 0.99 ? 'over 99 %' : `${(100 * weight).toFixed(0)} %`;
}
