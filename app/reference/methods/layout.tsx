import type { ReactNode } from 'react';
import { math } from './mathFont';

export default function MethodsLayout({ children }: { children: ReactNode }) {
  return <div className={math.variable}>{children}</div>;
}
