import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { Flag, LayerParams, ProjectParams, SurfaceParams } from '@/openapi/params';
import {
  Elevations,
  ElevationsQuery,
  Layer,
  LayerCreate,
  LayerPage,
  Surface,
  SurfaceCreate,
  SurfacePage,
} from '@/openapi/schemas/design';
import { LayerSummary } from '@/openapi/schemas/gradeCheck';
import { PageQuery } from '@/openapi/schemas/primitives';
import { LengthQuery } from '@/openapi/schemas/units';

const Paged = z.strictObject({ ...PageQuery.shape, ...LengthQuery.shape });

export const createSurface = contract({
  id: 'createSurface',
  method: 'post',
  path: '/projects/{projectId}/surfaces',
  tag: 'Surfaces and layers',
  summary: 'Bring in a surface',
  description:
    'Points with or without triangles, or a plane. The same content answers the surface that stands already.',
  access: 'design:write',
  params: ProjectParams,
  body: { json: SurfaceCreate, limit: 32 * 1024 * 1024 },
  answers: { 201: { description: 'The surface, with the hash of its content.', json: Surface } },
});

export const listSurfaces = contract({
  id: 'listSurfaces',
  method: 'get',
  path: '/projects/{projectId}/surfaces',
  tag: 'Surfaces and layers',
  summary: 'List surfaces',
  description: 'The surfaces of a project, newest first.',
  access: 'design:read',
  params: ProjectParams,
  query: Paged,
  answers: { 200: { description: 'A page of surfaces.', json: SurfacePage } },
  problems: ['cursor_invalid'],
});

export const getSurface = contract({
  id: 'getSurface',
  method: 'get',
  path: '/projects/{projectId}/surfaces/{surfaceId}',
  tag: 'Surfaces and layers',
  summary: 'Read a surface',
  description: 'What it represents, its size and the hash of its content.',
  access: 'design:read',
  params: SurfaceParams,
  query: LengthQuery,
  answers: { 200: { description: 'The surface.', json: Surface } },
});

export const querySurfaceElevations = contract({
  id: 'querySurfaceElevations',
  method: 'post',
  path: '/projects/{projectId}/surfaces/{surfaceId}/elevations',
  tag: 'Surfaces and layers',
  summary: 'Elevations of a surface',
  description: 'Elevation, slope and triangle at up to 10,000 places; null outside. It writes nothing.',
  access: 'design:read',
  params: SurfaceParams,
  body: { json: ElevationsQuery },
  answers: { 200: { description: 'One answer a place, in order.', json: Elevations } },
});

export const createLayer = contract({
  id: 'createLayer',
  method: 'post',
  path: '/projects/{projectId}/layers',
  tag: 'Surfaces and layers',
  summary: 'Make a layer',
  description:
    'A surface with a signed vertical offset and limits below and above. An existing name with other values is a new version, with ?revise=true only.',
  access: 'design:write',
  params: ProjectParams,
  query: z.strictObject({ revise: Flag.meta({ description: 'Make a new version of a layer that exists.' }) }),
  body: { json: LayerCreate },
  answers: { 201: { description: 'The layer.', json: Layer } },
  problems: ['layer_exists'],
});

export const listLayers = contract({
  id: 'listLayers',
  method: 'get',
  path: '/projects/{projectId}/layers',
  tag: 'Surfaces and layers',
  summary: 'List layers',
  description: 'The layers of a project in their present versions, by name.',
  access: 'design:read',
  params: ProjectParams,
  query: Paged,
  answers: { 200: { description: 'A page of layers.', json: LayerPage } },
  problems: ['cursor_invalid'],
});

export const getLayer = contract({
  id: 'getLayer',
  method: 'get',
  path: '/projects/{projectId}/layers/{layerName}',
  tag: 'Surfaces and layers',
  summary: 'Read a layer',
  description: 'Surface, offset, limits and acceptance rule in the present version.',
  access: 'design:read',
  params: LayerParams,
  query: LengthQuery,
  answers: { 200: { description: 'The layer.', json: Layer } },
});

export const getLayerSummary = contract({
  id: 'getLayerSummary',
  method: 'get',
  path: '/projects/{projectId}/layers/{layerName}/summary',
  tag: 'Grade',
  summary: 'How a layer stands',
  description:
    'Bias, spread and share within tolerance of the checks on a layer’s present version, with a verdict.',
  access: 'grade:read',
  params: LayerParams,
  query: LengthQuery,
  answers: { 200: { description: 'The summary.', json: LayerSummary } },
});
