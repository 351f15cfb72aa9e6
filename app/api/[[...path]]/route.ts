import { unknownPath } from '@/lib/http/route';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = unknownPath();
