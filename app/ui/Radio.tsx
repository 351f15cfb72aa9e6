/** What to say on the radio; it begins with the act. */
export function Radio({ children }: { children: string }) {
  return (
    <p className="mt-3.5 max-w-[62ch] border-l-[3px] border-mark pl-3.5 text-[17px] leading-snug">
      <span className="sr-only">Radio: </span>
      {children}
    </p>
  );
}
