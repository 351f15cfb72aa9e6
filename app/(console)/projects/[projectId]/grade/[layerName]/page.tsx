import type { Metadata } from 'next';
import { LayerSheet } from './LayerSheet';

export const metadata: Metadata = { title: 'Layer' };

export default async function LayerPage({
  params,
}: {
  params: Promise<{ projectId: string; layerName: string }>;
}) {
  const { projectId, layerName } = await params;
  return <LayerSheet projectId={projectId} layerName={decodeURIComponent(layerName)} />;
}
