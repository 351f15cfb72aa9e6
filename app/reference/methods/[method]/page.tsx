import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound } from 'next/navigation';
import type { Method } from '@/app/reference/methods/method';
import { METHODS } from '@/app/reference/methods/methods';
import { Part, Points } from '@/app/reference/methods/parts';
import { Heading } from '@/app/ui/frame/Heading';

type Props = { params: Promise<{ method: string }> };

/** By the name in its address, or by what results call it. */
async function find({ params }: Props): Promise<Method | undefined> {
  const name = decodeURIComponent((await params).method);
  return METHODS.find(({ slug, carried }) => slug === name || carried?.method === name);
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  return { title: (await find(props))?.title ?? 'Methods' };
}

export default async function MethodPage(props: Props) {
  const method = await find(props);
  if (!method) notFound();
  const { title, lead, carried, body, figures, assumes, limits, units, sources } = method;
  return (
    <article>
      <p className="mb-6 text-[13.5px] text-ink-third">
        <Link href="/reference/methods" className="underline">
          Methods
        </Link>{' '}
        / {title}
      </p>
      <Heading lead={lead}>{title}</Heading>
      {carried ? (
        <p className="mb-7 max-w-[68ch] border-l-[3px] border-mark pl-4">
          Results say <code className="font-code text-[13px]">{carried.method}</code>, version{' '}
          <code className="font-code text-[13px]">{carried.version}</code>. A change of figures raises the
          version; earlier results keep theirs.
        </p>
      ) : null}
      {body}
      {figures ? <Part title="Figures">{figures}</Part> : null}
      <Part title="What it assumes">
        <Points>{[...assumes]}</Points>
      </Part>
      <Part title="Where it ends">
        <Points>{[...limits]}</Points>
      </Part>
      <Part title="Units">
        <p>{units}</p>
      </Part>
      <Part title="Sources">
        <Points>{[...sources]}</Points>
      </Part>
    </article>
  );
}
