import { Catch, Logger, type ArgumentsHost, type ExceptionFilter } from '@nestjs/common';
import { toErrorRecord, type ErrorRecord } from '@cresthold/shared';
import type { Request, Response } from 'express';
import { logLevelOfKind } from './error-kind-tables.js';
import { problemMediaType, toProblemDetails } from './problem-details.schema.js';
import { RetryLaterError } from './retry-later-error.js';
import { toDomainError } from './to-domain-error.js';

/** Answers every error as problem details; the text of a bug goes into the log and nowhere else. */
@Catch()
export class ProblemDetailsFilter implements ExceptionFilter {
  private readonly logger = new Logger('Problem');

  catch(thrown: unknown, host: ArgumentsHost): void {
    const error = toDomainError(thrown);
    const record = toErrorRecord(error);
    if (host.getType() === 'ws') {
      this.log(record, thrown, 'live');
      const client = host.switchToWs().getClient<{ send: (text: string) => void }>();
      client.send(JSON.stringify({ type: 'error', message: record.message }));
      return;
    }
    const request = host.switchToHttp().getRequest<Request>();
    const response = host.switchToHttp().getResponse<Response>();
    this.log(record, thrown, `${request.method} ${request.path}`);
    if (response.headersSent) {
      response.destroy();
      return;
    }
    if (error instanceof RetryLaterError) response.setHeader('Retry-After', error.retryAfterS);
    sendProblem(response, record);
  }

  private log(record: ErrorRecord, thrown: unknown, where: string): void {
    const level = logLevelOfKind[record.kind];
    if (level === 'error') this.logger.error(`${where}: ${describe(thrown)}`);
    else this.logger[level](`${where}: ${record.code} ${record.message}`);
  }
}

/** Answers with problem details from outside of Nest's own request handling. */
export function sendProblem(response: Response, record: ErrorRecord): void {
  const problem = toProblemDetails(record);
  response.status(problem.status).type(problemMediaType).send(JSON.stringify(problem));
}

function describe(thrown: unknown): string {
  return thrown instanceof Error ? (thrown.stack ?? thrown.message) : String(thrown);
}
