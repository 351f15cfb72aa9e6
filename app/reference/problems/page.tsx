import type { Metadata } from 'next';
import Link from 'next/link';
import { Heading } from '@/app/ui/frame/Heading';
import { ITEM_PROBLEMS, type ProblemCode, REQUEST_PROBLEMS } from '@/openapi/problemCodes';

export const metadata: Metadata = { title: 'Problems' };

function List({ title, problems }: { title: string; problems: Record<string, ProblemCode> }) {
  return (
    <section className="mt-9">
      <h2 className="mb-3 font-head text-[19px]">{title}</h2>
      <ul className="border-t border-rule-strong">
        {Object.entries(problems).map(([code, { status, title: name }]) => (
          <li key={code} className="border-b border-rule">
            <Link
              href={`/reference/problems/${code}`}
              prefetch={false}
              className="group grid gap-x-6 py-2.5 no-underline md:grid-cols-[20rem_3rem_1fr]"
            >
              <code className="font-code text-[13px] text-ink">{code}</code>
              <span className="hidden text-ink-third md:block">{status}</span>
              <span className="text-ink-second group-hover:text-mark">{name}</span>
            </Link>
          </li>
        ))}
      </ul>
    </section>
  );
}

export default function ProblemsPage() {
  return (
    <>
      <Heading lead="Every error is a problem document (RFC 9457) with one of these codes. A code is never renamed.">
        Problems
      </Heading>
      <List title="Of a request as a whole" problems={REQUEST_PROBLEMS} />
      <List title="Of one place in a request" problems={ITEM_PROBLEMS} />
    </>
  );
}
