import Link from 'next/link';
import type { Ref } from 'react';
import type * as z from 'zod';
import { CheckSection } from '@/app/ui/draw/CheckSection';
import type { GradeShot } from '@/app/ui/draw/deviation';
import { Figure } from '@/app/ui/Figure';
import { type Entry, Ledger } from '@/app/ui/Ledger';
import { COORDINATE, fixed, signed, unitSign } from '@/app/ui/numbers';
import { State } from '@/app/ui/State';
import type { Layer } from '@/openapi/schemas/design';

/** The check that is chosen in the plan: both heights, what ground does there, and where it comes from. */
export function OneCheck({
  check,
  layer,
  projectId,
  panel,
  back,
}: {
  check: GradeShot;
  layer: z.output<typeof Layer>;
  projectId: string;
  panel: Ref<HTMLElement>;
  /** To the row of the table that it was chosen in. */
  back?: () => void;
}) {
  const unit = unitSign(check.units.length);
  const height = (name: string, value: number | null): Entry[] =>
    value === null
      ? []
      : [{ name, value: <Figure label={name} value={fixed(value, COORDINATE)} unit={unit} />, beside: unit }];
  const project = `/projects/${projectId}`;
  return (
    <section
      ref={panel}
      tabIndex={-1}
      aria-label={`Check ${check.clientId}`}
      aria-live="polite"
      className="scroll-mt-6 outline-none"
    >
      <CheckSection check={check} surface={surfaceWord(layer)} layer={layer.name} />
      <Ledger
        title={check.clientId}
        note={check.label ? `${check.label} ${unit}` : undefined}
        entries={[
          ...height(surfaceWord(layer), check.designElevation),
          ...height(layer.name, check.layerElevation),
          ...height('Ground', check.point.elevation),
          {
            name: 'Ground above the layer',
            value: check.deviation === null ? 'off the surface' : signed(check.deviation, COORDINATE),
            beside:
              check.standardDeviation === null ? unit : `± ${fixed(check.standardDeviation, COORDINATE)}`,
          },
          { name: 'Verdict', value: <State tone={check.verdict}>{check.verdict}</State> },
          ...(check.conformanceProbability === null
            ? []
            : [{ name: 'Chance that it is inside', value: percent(check.conformanceProbability) }]),
        ]}
      />
      <ul className="mt-2 space-y-1 text-[13.5px] text-ink-second">
        {check.reasons.map((reason) => (
          <li key={reason.code}>
            {reason.text} {reason.action}
          </li>
        ))}
        <li>
          {check.independent
            ? 'Independent of the setup that guided the machine.'
            : 'Not independent: the same setup guided the machine here.'}
        </li>
        <li>
          {check.setupId ? (
            <>
              <Link href={`${project}/setups/${check.setupId}`} className="underline">
                The setup it was shot from
              </Link>
              ,{' '}
            </>
          ) : null}
          <Link href={`${project}/uploads/${check.uploadId}`} className="underline">
            the bytes as they came
          </Link>
        </li>
      </ul>
      {back ? (
        <button
          type="button"
          onClick={back}
          className="mt-2 cursor-pointer text-[13.5px] font-semibold underline print:hidden"
        >
          Back to the table
        </button>
      ) : null}
    </section>
  );
}

/** A chance that is neither certain nor impossible is not written as if it were. */
function percent(chance: number): string {
  if (chance < 0.01) return 'under 1 %';
  return chance > 0.99 ? 'over 99 %' : `${fixed(100 * chance, 0)} %`;
}

function surfaceWord({ represents, surfaceName }: z.output<typeof Layer>): string {
  return represents === 'finish' ? 'Finish' : surfaceName;
}
