'use client';

import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useRouter } from 'next/navigation';
import type { FormEvent } from 'react';
import { call } from '@/app/ui/data/call';
import { refresh } from '@/app/ui/data/queries';
import { Button } from '@/app/ui/form/Button';
import { Field } from '@/app/ui/form/Field';
import { Select } from '@/app/ui/form/Select';
import { Failure } from '@/app/ui/Notice';
import type { LengthUnit } from '@/app/ui/numbers';
import type * as contracts from '@/openapi/contracts/projects';

/** Opens a project; unit and frame stand for good, the rest has defaults of common practice. */
export function NewProject() {
  const router = useRouter();
  const client = useQueryClient();
  const make = useMutation({
    mutationFn: (body: { name: string; lengthUnit: LengthUnit; frame: { kind: 'local' } }) =>
      call<typeof contracts.createProject>('POST', '/projects', { body }),
    onSuccess: async (project) => {
      await refresh(client, '/projects');
      router.push(`/projects/${project.id}/setups`);
    },
  });
  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const lengthUnit = String(form.get('lengthUnit')) as LengthUnit;
    make.mutate({ name: String(form.get('name')), lengthUnit, frame: { kind: 'local' } });
  }
  return (
    <section className="max-w-[34rem]">
      <h2 className="mb-3 font-head text-[19px]">Open a project</h2>
      <form onSubmit={submit} className="grid gap-4 sm:grid-cols-2">
        <Field label="Name" name="name" required maxLength={120} />
        <Select label="Length unit, for good" name="lengthUnit" defaultValue="ft">
          <option value="ft">international feet (0.3048 m)</option>
          <option value="ftUS">US survey feet (1200/3937 m)</option>
          <option value="m">metres</option>
        </Select>
        <div className="sm:col-span-2">
          {make.error ? <Failure error={make.error} /> : null}
          <Button type="submit" disabled={make.isPending} className="mt-2">
            Open project
          </Button>
        </div>
      </form>
    </section>
  );
}
