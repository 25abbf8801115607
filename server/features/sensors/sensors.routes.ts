import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  ofLabQuerySchema,
  saveSensorSchema,
  saveSetupSchema,
  sensorSchema,
  sensorsSchema,
  setupSchema,
  setupsSchema,
} from '../../../shared/contract/sensors.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { readIfMatch, withRevision } from '../../http/revision.ts';

export function sensorsRoutes(deps: Deps): Route[] {
  const { sensors } = deps.services;
  return [
    defineRoute({
      method: 'get',
      path: '/api/sensors',
      summary: 'Sensors of the labs that the person works for.',
      access: 'signed-in',
      query: ofLabQuerySchema,
      response: sensorsSchema,
      handler: ({ actor, query }) => sensors.listSensors(actor, query.labId),
    }),
    defineRoute({
      method: 'post',
      path: '/api/sensors',
      summary: 'Describes a new sensor of a lab.',
      access: 'signed-in',
      status: 201,
      body: saveSensorSchema,
      response: sensorSchema,
      handler: ({ actor, body, res }) => withRevision(res, sensors.createSensor(actor, body)),
    }),
    defineRoute({
      method: 'put',
      path: '/api/sensors/:id',
      summary: 'Replaces what is told about a sensor; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: saveSensorSchema,
      response: sensorSchema,
      handler: ({ actor, params, body, req, res }) =>
        withRevision(res, sensors.updateSensor(actor, params.id, readIfMatch({ req }), body)),
    }),
    ...setupsRoutes(deps),
  ];
}

function setupsRoutes({ services }: Deps): Route[] {
  const { sensors } = services;
  return [
    defineRoute({
      method: 'get',
      path: '/api/setups',
      summary: 'Set-ups of the labs that the person works for.',
      access: 'signed-in',
      query: ofLabQuerySchema,
      response: setupsSchema,
      handler: ({ actor, query }) => sensors.listSetups(actor, query.labId),
    }),
    defineRoute({
      method: 'post',
      path: '/api/setups',
      summary: 'Describes how a sensor is used in runs.',
      access: 'signed-in',
      status: 201,
      body: saveSetupSchema,
      response: setupSchema,
      handler: ({ actor, body, res }) => withRevision(res, sensors.createSetup(actor, body)),
    }),
    defineRoute({
      method: 'put',
      path: '/api/setups/:id',
      summary: 'Replaces what is told about a set-up; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: saveSetupSchema,
      response: setupSchema,
      handler: ({ actor, params, body, req, res }) =>
        withRevision(res, sensors.updateSetup(actor, params.id, readIfMatch({ req }), body)),
    }),
  ];
}
