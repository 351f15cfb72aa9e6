'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import { type FormEvent, useState } from 'react';
import { call, Refusal } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Check } from '@/app/ui/form/Check';
import { Drop } from '@/app/ui/form/Drop';
import { Select } from '@/app/ui/form/Select';
import { Failure } from '@/app/ui/Notice';
import { type LengthUnit, unitName } from '@/app/ui/numbers';
import type * as contracts from '@/openapi/contracts/control';
import { CONTROL_COLUMNS, CONTROL_NEEDED } from '@/openapi/controlTable';
import { PreviewTable } from './PreviewTable';
import { type Preview, readPreview } from './readPreview';
import { sayProblemOfFile } from './rowWords';

interface Order {
  length: LengthUnit;
  revise: boolean;
  confirmed: boolean;
}

/** Control from a file: what will be read is shown first, and afterwards what became of each row. */
export function ImportControl({ projectId, projectUnit }: { projectId: string; projectUnit: LengthUnit }) {
  const client = useQueryClient();
  const [preview, setPreview] = useState<Preview | null>(null);
  const [broken, setBroken] = useState<string | null>(null);
  const [unit, setUnit] = useState<LengthUnit | ''>('');
  const bring = useMutation({
    mutationFn: ({ length, revise, confirmed }: Order) =>
      call<typeof contracts.createControlPoints>('POST', '/projects/{projectId}/control-points', {
        params: { projectId },
        query: { length, revise: revise ? 'true' : undefined, confirmUnits: confirmed ? 'true' : undefined },
        text: { media: 'text/csv', content: preview?.text ?? '' },
      }),
    onSuccess: () => refresh(client, '/projects/{projectId}/control-points'),
  });
  async function take(file: File) {
    bring.reset();
    setBroken(null);
    setPreview(null);
    try {
      setPreview(await readPreview(file));
    } catch (error) {
      setBroken(error instanceof Error ? error.message : 'The file cannot be read as a table.');
    }
  }
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const length = String(form.get('length')) as LengthUnit;
    bring.mutate({ length, revise: form.has('revise'), confirmed: form.has('confirmed') });
  }
  const otherFoot = unit !== '' && unit !== projectUnit && unit !== 'm' && projectUnit !== 'm';
  const refused =
    bring.error instanceof Refusal ? (bring.error.problem.errors ?? []) : (bring.data?.refused ?? []);
  return (
    <section className="print:hidden">
      <h2 className="mb-3 font-head text-[19px]">Bring in control</h2>
      <Drop
        label="Drop a CSV file here, or choose one"
        hint={`A header row and one point a row: ${CONTROL_COLUMNS.map((column) => ((CONTROL_NEEDED as readonly string[]).includes(column) ? column : `[${column}]`)).join(', ')}.`}
        accept=".csv,text/csv"
        take={take}
      />
      {broken ? (
        <p role="alert" className="mt-3 font-medium text-fail">
          The file cannot be read as a table: {broken}
        </p>
      ) : null}
      {preview ? (
        <form onSubmit={submit} className="mt-6 space-y-5">
          {bring.data ? (
            <p role="status" className="font-medium">
              {bring.data.counts.created} new, {bring.data.counts.revised} in a new version,{' '}
              {bring.data.counts.unchanged} unchanged, {bring.data.counts.refused} refused.
              {refused.length > 0
                ? ' Mend the refused rows in the file and drop it again: what stands is not brought in twice.'
                : ''}
            </p>
          ) : null}
          <PreviewTable preview={preview} receipt={bring.data ?? null} refused={refused} />
          {bring.error ? <Failure error={bring.error} sayItem={sayProblemOfFile} /> : null}
          {bring.data ? null : (
            <>
              <div className="max-w-[18rem]">
                <Select
                  label="Unit of the coordinates in the file"
                  name="length"
                  required
                  value={unit}
                  onChange={(event) => setUnit(event.target.value as LengthUnit | '')}
                >
                  <option value="">choose</option>
                  <option value="ft">international feet (0.3048 m)</option>
                  <option value="ftUS">US survey feet (1200/3937 m)</option>
                  <option value="m">metres</option>
                </Select>
              </div>
              {otherFoot && unit ? (
                <Check name="confirmed" required>
                  The file really is in {unitName(unit)}, although the project is in {unitName(projectUnit)}
                </Check>
              ) : null}
              <Check
                name="revise"
                note="Without it a point that exists with other coordinates is refused. Setups that stand keep the version they were computed with."
              >
                Make new versions of points whose coordinates changed
              </Check>
              <div className="flex gap-3">
                <Button type="submit" disabled={bring.isPending}>
                  Bring in {preview.rows.length} {preview.rows.length === 1 ? 'point' : 'points'}
                </Button>
                <Button look="plain" onClick={() => setPreview(null)}>
                  Not this file
                </Button>
              </div>
            </>
          )}
        </form>
      ) : null}
    </section>
  );
}
