import type { Metadata } from 'next';
import { Crumb, PageHead } from '@/app/ui/frame/PageHead';
import { Projects } from './Projects';

export const metadata: Metadata = { title: 'Projects' };

export default function ProjectsPage() {
  return (
    <>
      <Crumb trail={[{ name: 'Projects' }]} />
      <PageHead title="Projects" sub="A site with its unit, its frame and its limits." />
      <Projects />
    </>
  );
}
