'use client';

import { useState } from 'react';
import { Caution } from '@/app/ui/Caution';
import { useCan } from '@/app/ui/data/whoami';
import { Button } from '@/app/ui/form/Button';
import { InForce } from './InForce';
import { RefitDialog } from './RefitDialog';
import { ReleaseDialog } from './ReleaseDialog';
import type { ShownSetup } from './SetupSheet';
import { WithdrawDialog } from './WithdrawDialog';

/** What may be done with a setup, with the caution beside it. */
export function Acts({ setup, projectId }: { setup: ShownSetup; projectId: string }) {
  const [open, setOpen] = useState<'release' | 'withdraw' | 'refit' | null>(null);
  const mayRelease = useCan('setups:release');
  const mayWithdraw = useCan('setups:withdraw');
  const mayRefit = useCan('setups:write');
  const { release, status, verdict } = setup;
  const releasable = verdict !== 'fail' && status !== 'withdrawn' && status !== 'superseded';
  const withdrawable = release !== null && status !== 'withdrawn';
  const close = () => setOpen(null);
  return (
    <section>
      <h2 className="mb-3 font-head text-[19px]">Release to a machine</h2>
      <Caution sentences={setup.cautions} />
      <InForce setup={setup} projectId={projectId} />
      <div className="mt-4 flex flex-wrap gap-3">
        {mayRelease ? (
          <Button disabled={!releasable} onClick={() => setOpen('release')}>
            Release
          </Button>
        ) : null}
        {mayWithdraw ? (
          <Button look="plain" disabled={!withdrawable} onClick={() => setOpen('withdraw')}>
            Withdraw
          </Button>
        ) : null}
        {mayRefit ? (
          <Button look="plain" disabled={status === 'superseded'} onClick={() => setOpen('refit')}>
            Refit
          </Button>
        ) : null}
        <Button look="plain" onClick={() => window.print()}>
          Print the sheet
        </Button>
      </div>
      {!mayRelease && !mayWithdraw ? (
        <p className="mt-3 text-[13.5px] text-ink-third">Your role reads setups; a surveyor releases them.</p>
      ) : null}
      {mayRelease && !releasable ? (
        <p className="mt-3 text-[13.5px] text-ink-third">
          {verdict === 'fail'
            ? 'A setup that fails is not released: shoot again or refit.'
            : `A ${status} setup is not released.`}
        </p>
      ) : null}
      {open === 'release' ? <ReleaseDialog setup={setup} projectId={projectId} close={close} /> : null}
      {open === 'withdraw' ? <WithdrawDialog setup={setup} projectId={projectId} close={close} /> : null}
      {open === 'refit' ? <RefitDialog setup={setup} projectId={projectId} close={close} /> : null}
    </section>
  );
}
