import { Injectable } from '@nestjs/common';
import type { Request } from 'express';
import { DataSource } from 'typeorm';
import { apiPrefix } from '../http/api-prefix.js';

/** Table of the documents that a route's first part names, for routes with an `:id`. */
const tables: Record<string, string> = {
  calibrations: 'calibration',
  envelopes: 'envelope',
  experiments: 'experiment',
  objectives: 'objective',
  runs: 'run',
};

/** Finds the rigs that a request is about, from its path, query or body: the one place that knows. */
@Injectable()
export class RigsOfRequest {
  constructor(private readonly database: DataSource) {}

  /** @returns ids of rigs, none where it is about no rig that is known; null where that cannot be told */
  async find(request: Request): Promise<string[] | null> {
    const [first = ''] = routePath(request);
    const { rigId, id } = request.params;
    const named = [rigId, request.query['rigId'], ...this.inBody(first, request)].flat().filter(isText);
    const experimentId = fieldOf(request.body, 'experimentId');
    if (isText(experimentId)) named.push(...(await this.rigOf('experiment', experimentId)));
    if (!isText(id)) return named;
    const table = tables[first];
    return table === undefined ? null : [...named, ...(await this.rigOf(table, id))];
  }

  private inBody(first: string, request: Request): unknown[] {
    const named = [fieldOf(request.body, 'rigId')];
    const makesRig = first === 'rigs' && request.method === 'POST' && routePath(request).length === 1;
    return makesRig ? [...named, fieldOf(request.body, 'id')] : named;
  }

  private async rigOf(table: string, id: string): Promise<string[]> {
    const rows = await this.database.query<{ rigId: string }[]>(
      `SELECT "rigId" FROM "${table}" WHERE "id" = ?`,
      [id],
    );
    return rows.map((row) => row.rigId);
  }
}

/** Parts of the route below the API's prefix, e.g. `runs`, `:id`, `pause`. */
function routePath(request: Request): string[] {
  const { path } = request.route as { path: string };
  return path.replace(`/${apiPrefix}/`, '').split('/');
}

function fieldOf(body: unknown, field: string): unknown {
  return typeof body === 'object' && body !== null ? (body as Record<string, unknown>)[field] : undefined;
}

function isText(value: unknown): value is string {
  return typeof value === 'string';
}
