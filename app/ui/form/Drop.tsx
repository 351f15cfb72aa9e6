'use client';

import { type DragEvent, useId, useState } from 'react';

/** Takes a file by drop, or by choosing one. */
export function Drop({
  label,
  hint,
  accept,
  take,
}: {
  label: string;
  hint: string;
  accept: string;
  take: (file: File) => void;
}) {
  const id = useId();
  const [over, setOver] = useState(false);
  function drop(event: DragEvent) {
    event.preventDefault();
    setOver(false);
    const [file] = event.dataTransfer.files;
    if (file) take(file);
  }
  return (
    <label
      htmlFor={id}
      onDragOver={(event) => {
        event.preventDefault();
        setOver(true);
      }}
      onDragLeave={() => setOver(false)}
      onDrop={drop}
      className={`block cursor-pointer rounded border-[1.5px] border-dashed px-6 py-8 text-center focus-within:border-ink hover:border-ink ${over ? 'border-mark bg-mark-soft' : 'border-rule-strong'}`}
    >
      <span className="block font-head text-[19px]">{label}</span>
      <span className="mt-1 block text-ink-second">{hint}</span>
      <input
        id={id}
        type="file"
        accept={accept}
        className="sr-only"
        onChange={(event) => {
          const [file] = event.target.files ?? [];
          if (file) take(file);
          event.target.value = '';
        }}
      />
    </label>
  );
}
