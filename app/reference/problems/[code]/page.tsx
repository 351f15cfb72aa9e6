import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound } from 'next/navigation';
import { Heading } from '@/app/ui/frame/Heading';
import { ITEM_PROBLEMS, type ProblemCode, REQUEST_PROBLEMS } from '@/openapi/problemCodes';

const PROBLEMS: Record<string, ProblemCode> = { ...REQUEST_PROBLEMS, ...ITEM_PROBLEMS };

type Props = { params: Promise<{ code: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: (await params).code };
}

export default async function ProblemPage({ params }: Props) {
  const { code } = await params;
  if (!Object.hasOwn(PROBLEMS, code)) notFound();
  const { status, title, meaning, fix } = PROBLEMS[code];
  return (
    <>
      <p className="mb-6 text-[13.5px] text-ink-third">
        <Link href="/reference/problems" className="underline">
          Problems
        </Link>{' '}
        / {code}
      </p>
      <Heading lead={meaning}>{title}</Heading>
      <p className="max-w-[62ch] border-l-[3px] border-mark pl-4 text-[17px]">{fix}</p>
      <dl className="mt-8 grid max-w-[26rem] grid-cols-[8rem_1fr] border-t border-rule">
        <dt className="border-b border-rule py-2 text-ink-second">Code</dt>
        <dd className="border-b border-rule py-2 font-code text-[13px]">{code}</dd>
        <dt className="border-b border-rule py-2 text-ink-second">HTTP status</dt>
        <dd className="border-b border-rule py-2">{status}</dd>
      </dl>
    </>
  );
}
