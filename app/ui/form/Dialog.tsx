'use client';

import { type ReactNode, useEffect, useId, useRef } from 'react';

/** A sheet over the page; Escape and the backdrop close it, focus returns to where it was. */
export function Dialog({
  title,
  close,
  children,
}: {
  title: string;
  close: () => void;
  children: ReactNode;
}) {
  const element = useRef<HTMLDialogElement>(null);
  const id = useId();
  useEffect(() => {
    element.current?.showModal();
  }, []);
  return (
    <dialog
      ref={element}
      aria-labelledby={id}
      onClose={close}
      className="m-auto w-[min(34rem,calc(100vw-2rem))] rounded border border-rule-strong bg-paper p-6 text-ink backdrop:bg-black/45"
    >
      <h2 id={id} className="mb-4 font-head text-2xl leading-none">
        {title}
      </h2>
      {children}
    </dialog>
  );
}
