import { z } from 'zod';
import {
  checkAnswerSchema,
  checkRequestSchema,
  loadAnswerSchema,
  loadRequestSchema,
  outageAnswerSchema,
  outageRequestSchema,
  rulesAnswerSchema,
  rulesRequestSchema,
  traceAnswerSchema,
  traceRequestSchema,
} from '#contract/engine.ts';
import { wireRequestSchema } from '#engine/wire/wire-request.ts';
import type { Operation } from './operation.ts';

export const engineOperations = {
  'GET /api/health': {
    summary: 'Say whether the server reaches its database',
    description: 'Answers 503 while it does not.',
    answer: { schema: z.object({ status: z.literal('ok') }) },
  },
  'GET /api/openapi.json': {
    summary: 'Describe every route',
    description: 'This document, by the OpenAPI Specification 3.1.',
    answer: { schema: z.record(z.string(), z.unknown()) },
  },
  'POST /api/engine/check': {
    summary: 'Check a design',
    description: 'The design in its own JSON; nothing of it is kept.',
    body: checkRequestSchema,
    answer: { schema: checkAnswerSchema },
  },
  'POST /api/engine/rules': {
    summary: 'List the checks, or run some of them',
    body: rulesRequestSchema,
    answer: { schema: rulesAnswerSchema },
  },
  'POST /api/engine/wire': {
    summary: 'Work out bytes on the wire',
    description: 'For a stack of layers, in both directions, with the working.',
    body: wireRequestSchema,
    answer: { schema: z.record(z.string(), z.unknown()) },
  },
  'POST /api/engine/trace': {
    summary: 'Follow one frame through a design',
    body: traceRequestSchema,
    answer: { schema: traceAnswerSchema },
  },
  'POST /api/engine/load': {
    summary: 'Lay the demands of a design onto it',
    body: loadRequestSchema,
    answer: { schema: loadAnswerSchema },
  },
  'POST /api/engine/outage': {
    summary: 'Say what parts once some elements have failed together',
    body: outageRequestSchema,
    answer: { schema: outageAnswerSchema },
  },
} as const satisfies { readonly [route: string]: Operation };
