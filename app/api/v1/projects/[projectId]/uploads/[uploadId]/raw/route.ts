import { Attachment } from '@/lib/http/answer';
import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readUploadRaw } from '@/lib/services/uploads/read';
import * as contracts from '@/openapi/contracts/uploads';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getUploadRaw, async (context, input) => {
    const { bytes, fileName } = await readUploadRaw(context, input);
    return new Attachment(bytes, fileName);
  }),
});
