import type { ReactNode } from 'react';
import { Queries } from '@/app/ui/data/Queries';
import { Frame } from '@/app/ui/frame/Frame';

export default function ConsoleLayout({ children }: { children: ReactNode }) {
  return (
    <Queries>
      <Frame>{children}</Frame>
    </Queries>
  );
}
