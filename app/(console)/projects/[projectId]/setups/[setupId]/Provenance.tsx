import Link from 'next/link';
import { moment } from '@/app/ui/numbers';
import type { ShownSetup } from './SetupSheet';

/** Where every figure comes from, down to the bytes as they came. */
export function Provenance({ setup, projectId }: { setup: ShownSetup; projectId: string }) {
  const { provenance, excluded, supersedes, supersededBy } = setup;
  const setups = `/projects/${projectId}/setups`;
  return (
    <section>
      <h2 className="mb-2 font-head text-[19px]">Where it comes from</h2>
      <p className="max-w-[70ch] text-ink-second">
        Result {provenance.resultVersion} by{' '}
        <Link
          href={`/reference/methods/${encodeURIComponent(provenance.method)}`}
          prefetch={false}
          className="underline"
        >
          {provenance.method}
        </Link>
        , version {provenance.version}, computed {moment(provenance.computedAt)} with{' '}
        {provenance.instrument.name} as stated in version {provenance.instrument.calibration} and control{' '}
        {provenance.control.map(({ name, version }) => `${name} v${version}`).join(', ')}.{' '}
        <Link href={`/projects/${projectId}/uploads/${provenance.uploadId}`} className="underline">
          See the bytes as they came
        </Link>
        .
      </p>
      {excluded.length > 0 ? (
        <p className="mt-2 max-w-[70ch] text-ink-second">
          Left out by a refit: {excluded.map(({ shot, reason }) => `${shot} (${reason})`).join(', ')}.
        </p>
      ) : null}
      {supersedes ? (
        <p className="mt-2">
          <Link href={`${setups}/${supersedes}`} className="underline">
            The setup that this one supersedes
          </Link>
        </p>
      ) : null}
      {supersededBy ? (
        <p className="mt-2">
          <Link href={`${setups}/${supersededBy}`} className="underline">
            The refit that supersedes this setup
          </Link>
        </p>
      ) : null}
    </section>
  );
}
