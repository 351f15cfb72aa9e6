import type { ReactNode } from 'react';
import { Queries } from '@/app/ui/data/Queries';
import { Frame } from '@/app/ui/frame/Frame';
import { ReferenceTabs } from './ReferenceTabs';

export default function ReferenceLayout({ children }: { children: ReactNode }) {
  return (
    <Queries open>
      <Frame>
        <ReferenceTabs />
        {children}
      </Frame>
    </Queries>
  );
}
