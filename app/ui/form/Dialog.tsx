'use client';

import { type ReactNode, useEffect, useId, useRef } from 'react';

interface Props {
  title: string;
  close: () => void;
  /** While something would be lost: Escape does nothing. */
  held?: boolean;
  children: ReactNode;
}

/** A sheet over the page; Escape closes it, focus returns to where it was. */
export function Dialog({ title, close, held = false, children }: Props) {
  const element = useRef<HTMLDialogElement>(null);
  const id = useId();
  useEffect(() => {
    element.current?.showModal();
  }, []);
  return (
    <dialog
      ref={element}
      aria-labelledby={id}
      onCancel={(event) => {
        if (held) event.preventDefault();
      }}
      // Browsers close on a second Escape whatever was prevented.
      onClose={() => (held ? element.current?.showModal() : close())}
      className="m-auto w-[min(34rem,calc(100vw-2rem))] rounded border border-ink-third bg-raised p-6 text-ink shadow-2xl backdrop:bg-black/60"
    >
      <h2 id={id} className="mb-4 font-head text-2xl leading-none">
        {title}
      </h2>
      {children}
    </dialog>
  );
}
