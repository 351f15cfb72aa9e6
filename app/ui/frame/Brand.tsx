import Link from 'next/link';
import { Mark } from '@/app/ui/draw/Mark';

export function Brand() {
  return (
    <Link
      href="/"
      className="inline-flex items-center gap-3 font-head text-[21px] leading-none text-ink no-underline"
    >
      <Mark />
      Hubtack
    </Link>
  );
}
