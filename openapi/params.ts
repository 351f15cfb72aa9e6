import * as z from 'zod';
import { Id, Name } from './schemas/primitives';

export const ProjectParams = z.strictObject({ projectId: Id });
export const PointParams = z.strictObject({ projectId: Id, pointName: Name });
export const InstrumentParams = z.strictObject({ projectId: Id, instrumentName: Name });
export const UploadParams = z.strictObject({ projectId: Id, uploadId: Id });
export const SetupParams = z.strictObject({ projectId: Id, setupId: Id });
export const SurfaceParams = z.strictObject({ projectId: Id, surfaceId: Id });
export const LayerParams = z.strictObject({ projectId: Id, layerName: Name });
export const GradeCheckParams = z.strictObject({ projectId: Id, gradeCheckId: Id });
export const BenchCheckParams = z.strictObject({ projectId: Id, benchCheckId: Id });
export const LevelRunParams = z.strictObject({ projectId: Id, levelRunId: Id });
export const PegTestParams = z.strictObject({ projectId: Id, pegTestId: Id });
export const AcknowledgementParams = z.strictObject({ projectId: Id, acknowledgementId: Id });
export const ApiKeyParams = z.strictObject({ apiKeyId: Id });
export const WebhookEndpointParams = z.strictObject({ webhookEndpointId: Id });
export const WebhookDeliveryParams = z.strictObject({ webhookEndpointId: Id, deliveryId: Id });
export const JobParams = z.strictObject({ jobId: Id });
export const AdjustmentParams = z.strictObject({ projectId: Id, adjustmentId: Id });
export const PersonParams = z.strictObject({ personId: Id });

/** `?name=true`. */
export const Flag = z.enum(['true', 'false']).optional();
