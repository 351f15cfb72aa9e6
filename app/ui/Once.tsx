'use client';

import { useState } from 'react';
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
  const [copied, setCopied] = useState(false);
  async function copy() {
    await navigator.clipboard.writeText(secret);
    setCopied(true);
  }
  return (
    <div className="space-y-4">
      <p>
        This is {what}. It is shown now and never again. {note}
      </p>
      <p className="rounded border border-mark bg-mark-soft px-4 py-3">
        <code data-secret className="font-code text-[13px] break-all select-all">
          {secret}
        </code>
      </p>
      <div className="flex items-center gap-3">
        <Button onClick={copy}>Copy</Button>
        <Button look="plain" onClick={close}>
          I have kept it
        </Button>
        <span role="status" className="font-medium text-pass">
          {copied ? 'Copied.' : ''}
        </span>
      </div>
    </div>
  );
}
