import type { Metadata } from 'next';
import { PointSheet } from './PointSheet';

export const metadata: Metadata = { title: 'Control point' };

export default async function PointPage({
  params,
}: {
  params: Promise<{ projectId: string; pointName: string }>;
}) {
  const { projectId, pointName } = await params;
  return <PointSheet projectId={projectId} pointName={decodeURIComponent(pointName)} />;
}
