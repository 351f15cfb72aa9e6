import { contract } from '@/openapi/contract';
import { ProjectParams } from '@/openapi/params';
import { PageQuery } from '@/openapi/schemas/primitives';
import { Project, ProjectCreate, ProjectPage, ProjectPatch } from '@/openapi/schemas/project';

export const listProjects = contract({
  id: 'listProjects',
  method: 'get',
  path: '/projects',
  tag: 'Projects',
  summary: 'List projects',
  description: 'The projects that this key or person may see, newest first.',
  access: 'projects:read',
  query: PageQuery,
  answers: { 200: { description: 'A page of projects.', json: ProjectPage } },
  problems: ['cursor_invalid'],
});

export const createProject = contract({
  id: 'createProject',
  method: 'post',
  path: '/projects',
  tag: 'Projects',
  summary: 'Open a project',
  description:
    'Fixes the length unit and the frame for good. Tolerance classes of common practice come with it, every figure of them editable.',
  access: 'projects:write',
  organizationWide: true,
  body: { json: ProjectCreate },
  answers: { 201: { description: 'The project.', json: Project } },
  problems: ['name_taken'],
});

export const getProject = contract({
  id: 'getProject',
  method: 'get',
  path: '/projects/{projectId}',
  tag: 'Projects',
  summary: 'Read a project',
  description: 'Units, frame, tolerance classes and defaults.',
  access: 'projects:read',
  params: ProjectParams,
  answers: { 200: { description: 'The project.', json: Project } },
});

export const updateProject = contract({
  id: 'updateProject',
  method: 'patch',
  path: '/projects/{projectId}',
  tag: 'Projects',
  summary: 'Change a project',
  description:
    'Lengths are in the project’s own unit. Results that stand keep the settings they were computed with.',
  access: 'projects:write',
  params: ProjectParams,
  body: { json: ProjectPatch },
  answers: { 200: { description: 'The project.', json: Project } },
  problems: ['name_taken'],
});
