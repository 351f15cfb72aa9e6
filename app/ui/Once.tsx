'use client';

import { useRef, useState } from 'react';
import { copy, select } from './clipboard';
import { Button } from './form/Button';

/** A secret that is shown once: with the means to copy it, and what to do with it. */
export function Once({
  secret,
  what,
  note,
  close,
}: {
  secret: string;
  what: string;
  note: string;
  close: () => void;
}) {
  const shown = useRef<HTMLElement>(null);
  const [said, setSaid] = useState('');
  async function press() {
    const copied = await copy(secret);
    if (!copied) select(shown.current!);
    setSaid(copied ? 'Copied.' : 'It is selected: press Ctrl+C.');
  }
  return (
    <div className="space-y-4">
      <p>
        This is {what}. It is shown now and never again. {note}
      </p>
      <p className="rounded border border-mark bg-mark-soft px-4 py-3">
        <code ref={shown} data-secret className="font-code text-[13px] break-all select-all">
          {secret}
        </code>
      </p>
      <div className="flex flex-wrap items-center gap-3">
        <Button onClick={press}>Copy</Button>
        <Button look="plain" onClick={close}>
          I have kept it
        </Button>
        <span role="status" className="font-medium text-pass">
          {said}
        </span>
      </div>
    </div>
  );
}
