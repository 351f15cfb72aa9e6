'use client';

import Link from 'next/link';
import { usePathname } from 'next/navigation';

const SECTIONS: Partial<Record<string, string>> = {
  setups: 'All setups of the project',
  control: 'All control of the project',
  grade: 'All layers of the project',
  uploads: 'All uploads of the project',
};

/** From an address that leads to nothing: to the list that it would stand in, and to the projects. */
export function WaysBack() {
  const [, projects, project, section, item] = usePathname().split('/');
  const list = section ? SECTIONS[section] : undefined;
  return (
    <>
      {item && list ? <Link href={`/${projects}/${project}/${section}`}>{list}</Link> : null}
      <Link href="/projects">All projects</Link>
    </>
  );
}
