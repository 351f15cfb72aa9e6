/** Where the API lives. */
export const API_BASE = '/api/v1';
