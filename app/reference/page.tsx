import type { Metadata } from 'next';
import { headers } from 'next/headers';
import { Reference } from './Reference';

export const metadata: Metadata = { title: 'Reference' };

export default async function ReferencePage() {
  const nonce = (await headers()).get('x-nonce') ?? undefined;
  return <Reference nonce={nonce} />;
}
