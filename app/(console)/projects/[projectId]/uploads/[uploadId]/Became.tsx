import Link from 'next/link';
import type { ReactNode } from 'react';
import { worstOutcome } from '@/app/ui/checkOutcome';
import { signed, unitSign } from '@/app/ui/numbers';
import { State, type Tone } from '@/app/ui/State';
import type { AnswerOf } from '@/openapi/contract';
import type * as contracts from '@/openapi/contracts/uploads';

type Receipt = AnswerOf<typeof contracts.getUpload>;

/** What became of the accepted items, each with the way to it. */
export function Became({ receipt, projectId }: { receipt: Receipt; projectId: string }) {
  const project = `/projects/${projectId}`;
  const { setups, setupChecks, benchChecks, gradeChecks, levelRuns, pegTests } = receipt;
  const layers = [...new Set(gradeChecks.map(({ layer }) => layer))];
  const became = [setups, setupChecks, benchChecks, gradeChecks, levelRuns, pegTests];
  if (became.every((items) => items.length === 0)) return null;
  return (
    <section>
      <h2 className="mb-2 font-head text-[19px]">What became of the rest</h2>
      <ul className="border-t border-rule-strong">
        {setups.map((setup) => (
          <Item key={setup.id} tone={setup.verdict} word={setup.verdict}>
            <Link href={`${project}/setups/${setup.id}`} className="font-semibold text-ink">
              Setup {setup.station}
            </Link>
            <span className="block text-ink-second">{setup.radio}</span>
          </Item>
        ))}
        {setupChecks.map((check) => (
          <Item
            key={check.id}
            {...worstOutcome(check.targets.flatMap(({ horizontal, vertical }) => [horizontal, vertical]))}
          >
            <Link href={`${project}/setups/${check.setupId}`} className="font-semibold text-ink">
              Check of a setup
            </Link>
            <span className="block text-ink-second">
              on {check.targets.map(({ target }) => target).join(', ')}
            </span>
          </Item>
        ))}
        {benchChecks.map((check) => (
          <Item key={check.id} tone={check.verdict} word={check.verdict}>
            <span className="font-semibold">
              {check.machine}, {check.edge} edge on {check.benchmark}: {signed(check.difference, 3)}{' '}
              {unitSign(check.units.length)}
            </span>
            <span className="block text-ink-second">{check.instruction}</span>
          </Item>
        ))}
        {pegTests.map((test) => (
          <Item key={test.id} tone={test.verdict} word={test.verdict}>
            <span className="font-semibold">
              Two-peg test of {test.instrument}: {signed(test.collimation.arcsec, 1)}″
            </span>
            <span className="block text-ink-second">{test.reasons[0]?.text}</span>
          </Item>
        ))}
        {levelRuns.map((run) => (
          <Item key={run.id} tone={run.verdict} word={run.verdict}>
            <span className="font-semibold">
              Level run {run.from} to {run.to}
            </span>
            <span className="block text-ink-second">{run.radio}</span>
          </Item>
        ))}
        {layers.map((layer) => {
          const checks = gradeChecks.filter((check) => check.layer === layer);
          const count = (verdict: string) => checks.filter((check) => check.verdict === verdict).length;
          const worst = count('fail') > 0 ? 'fail' : count('hold') > 0 ? 'hold' : 'pass';
          return (
            <Item
              key={layer}
              tone={worst}
              word={`${count('pass')} pass, ${count('hold')} hold, ${count('fail')} fail`}
            >
              <Link href={`${project}/grade/${encodeURIComponent(layer)}`} className="font-semibold text-ink">
                {checks.length} grade {checks.length === 1 ? 'check' : 'checks'} on {layer}
              </Link>
            </Item>
          );
        })}
      </ul>
    </section>
  );
}

function Item({ tone, word, children }: { tone: Tone; word: string; children: ReactNode }) {
  return (
    <li className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1 border-b border-rule py-3">
      <div className="min-w-0 basis-[30rem]">{children}</div>
      <State tone={tone}>{word}</State>
    </li>
  );
}
