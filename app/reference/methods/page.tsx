import type { Metadata } from 'next';
import Link from 'next/link';
import { Heading } from '@/app/ui/frame/Heading';
import type { Method } from './method';
import { METHODS } from './methods';

export const metadata: Metadata = { title: 'Methods' };

const GROUPS: Method['group'][] = ['Readings', 'Setups', 'Levels and control', 'Ground and blades'];

export default function MethodsPage() {
  const groups = GROUPS.map((group) => ({
    group,
    methods: METHODS.filter((method) => method.group === group),
  })).filter(({ methods }) => methods.length > 0);
  return (
    <>
      <Heading lead="How every figure is computed: in words and formulas, with its source, what it assumes and where it ends. The figures on these pages are those that the hub computes with.">
        Methods
      </Heading>
      {groups.map(({ group, methods }) => (
        <section key={group} className="mt-9">
          <h2 className="mb-3 font-head text-[19px]">{group}</h2>
          <ul className="border-t border-rule-strong">
            {methods.map(({ slug, title, lead, carried }) => (
              <li key={slug} className="border-b border-rule">
                <Link
                  href={`/reference/methods/${slug}`}
                  prefetch={false}
                  className="group grid gap-x-6 gap-y-1 py-3 no-underline md:grid-cols-[15rem_minmax(0,1fr)]"
                >
                  <span className="font-medium text-ink underline group-hover:text-mark">{title}</span>
                  <span className="max-w-[70ch] text-ink-second">
                    {lead}
                    {carried ? (
                      <span className="block text-[13.5px] text-ink-third">
                        {carried.method}, version {carried.version}
                      </span>
                    ) : null}
                  </span>
                </Link>
              </li>
            ))}
          </ul>
        </section>
      ))}
    </>
  );
}
