'use client';

import Link from 'next/link';
import { useState } from 'react';
import { useCan } from '@/app/ui/data/whoami';
import { Button } from '@/app/ui/form/Button';
import { moment } from '@/app/ui/numbers';
import { Radio } from '@/app/ui/Radio';
import { State } from '@/app/ui/State';
import { AnswerDialog } from './AnswerDialog';
import type { Listed, Withdrawal } from './withdrawal';

/** Crews that have not answered: what to say to each, and the answer. */
export function Waiting({ projectId, rows, more }: Listed) {
  const [answering, setAnswering] = useState<Withdrawal | null>(null);
  const mayAnswer = useCan('acknowledgements:write');
  return (
    <section>
      <h2 className="mb-1 font-head text-[19px]">Not answered yet</h2>
      {mayAnswer ? null : (
        <p className="mb-2 text-[13.5px] text-ink-second">
          Your role reads withdrawals; a foreman or a surveyor answers them.
        </p>
      )}
      <ul className="border-t-[1.5px] border-rule-strong">
        {rows.map((withdrawal) => (
          <li
            key={withdrawal.id}
            className="flex flex-wrap items-center justify-between gap-x-7 gap-y-4 border-b border-rule py-5"
          >
            <div className="min-w-0 grow basis-[24rem] max-md:basis-full">
              <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
                <h3 className="font-head text-[22px] leading-none">{withdrawal.machine}</h3>
                <State tone="hold">waits</State>
              </div>
              <Radio>{withdrawal.text}</Radio>
              <p className="mt-3 text-[13.5px] text-ink-second">
                Withdrawn {moment(withdrawal.withdrawnAt)} by {withdrawal.withdrawnBy}.{' '}
                <Link href={`/projects/${projectId}/setups/${withdrawal.setupId}`} className="underline">
                  See {withdrawal.station}
                </Link>
              </p>
            </div>
            {mayAnswer ? (
              <Button onClick={() => setAnswering(withdrawal)}>{withdrawal.machine} has stopped</Button>
            ) : null}
          </li>
        ))}
      </ul>
      {more.has ? (
        <Button look="plain" small className="mt-4" disabled={more.busy} onClick={more.read}>
          {more.busy ? 'Reading…' : 'Show more'}
        </Button>
      ) : null}
      {answering ? (
        <AnswerDialog projectId={projectId} withdrawal={answering} close={() => setAnswering(null)} />
      ) : null}
    </section>
  );
}
