import { Body, Controller, Get, Module, Post } from '@nestjs/common';
import type { INestApplication } from '@nestjs/common';
import { Test } from '@nestjs/testing';
import { DomainError, errorCatalogue, errorCodes } from '@cresthold/shared';
import request from 'supertest';
import { z } from 'zod';
import { statusOfKind } from '../../src/problem-details/error-kind-tables.js';
import { ProblemDetailsModule } from '../../src/problem-details/problem-details.module.js';
import { fieldPath } from '../../src/problem-details/request-validation.pipe.js';

const bodySchema = z.object({ limits: z.array(z.object({ max: z.number() })) });

@Controller()
class FailingController {
  @Get('bug')
  bug(): never {
    throw new Error('the password is hunter2');
  }

  @Get('busy')
  busy(): never {
    throw new DomainError('rig.busy', 'Rig "kiln-1" runs until it is stopped.', [
      { field: 'rigId', message: 'busy' },
    ]);
  }

  @Post('limits')
  limits(@Body({ schema: bodySchema }) body: z.infer<typeof bodySchema>): z.infer<typeof bodySchema> {
    return body;
  }

  @Post('stop')
  stop(@Body({ schema: z.object({ reason: z.string() }).optional() }) body?: { reason: string }): object {
    return { reason: body?.reason ?? 'none given' };
  }
}

@Module({ imports: [ProblemDetailsModule], controllers: [FailingController] })
class FailingModule {}

describe('problem details', () => {
  let app: INestApplication;

  beforeAll(async () => {
    const module = await Test.createTestingModule({ imports: [FailingModule] }).compile();
    app = module.createNestApplication({ logger: false });
    await app.init();
  });
  afterAll(() => app.close());

  it('carry type, title, status, detail, code and the fields at fault (RFC 9457)', async () => {
    const answer = await request(app.getHttpServer()).get('/busy').expect(409);
    expect(answer.headers['content-type']).toMatch(/^application\/problem\+json/);
    expect(answer.body).toEqual({
      type: 'urn:cresthold:error:rig.busy',
      title: 'Not possible now',
      status: 409,
      detail: 'Rig "kiln-1" runs until it is stopped.',
      code: 'rig.busy',
      errors: [{ field: 'rigId', message: 'busy' }],
    });
  });

  it('keep the text of a bug inside', async () => {
    const answer = await request(app.getHttpServer()).get('/bug').expect(500);
    expect(answer.body).toMatchObject({ code: 'server.bug', detail: errorCatalogue['server.bug'].message });
    expect(answer.text).not.toContain('hunter2');
  });

  it('name the path of each field', async () => {
    const send = (body: object) => request(app.getHttpServer()).post('/limits').send(body).expect(400);
    const answer = await send({ limits: [{ max: 1 }, { max: 'much' }, {}] });
    expect(answer.body.errors.map((error: { field: string }) => error.field)).toEqual([
      'limits[1].max',
      'limits[2].max',
    ]);
  });

  it('let a body be left out where its schema does, and say so where it does not', async () => {
    const stop = await request(app.getHttpServer()).post('/stop').expect(201);
    expect(stop.body).toEqual({ reason: 'none given' });
    const limits = await request(app.getHttpServer()).post('/limits').expect(400);
    expect(limits.body.code).toBe('request.media-type');
  });

  it('write paths as people do', () => {
    expect(fieldPath(['limits', 0, 'max'])).toBe('limits[0].max');
    expect(fieldPath([])).toBe('');
    expect(fieldPath([2, 'id'])).toBe('[2].id');
  });

  it('have an error status for every code of the catalogue', () => {
    for (const code of errorCodes) {
      expect(statusOfKind[errorCatalogue[code].kind]).toBeGreaterThanOrEqual(400);
    }
  });
});
