import type { FromLive } from '@cresthold/shared';
import { WebSocket } from 'ws';

// eslint-disable-next-line @typescript-eslint/no-explicit-any -- each test judges what came back by itself
export type Body = any;

export interface Answer {
  status: number;
  body: Body;
  headers: Headers;
}

/** A script's view of the API: HTTP and the cookie of a session, nothing else. */
export class ApiClient {
  cookie = '';

  constructor(public baseUrl: string) {}

  /** Signs in as somebody. */
  static async signIn(baseUrl: string, account: string, password: string): Promise<ApiClient> {
    const client = new ApiClient(baseUrl);
    const { headers } = await client.expect(200, 'POST', 'auth/sign-in', { account, password });
    client.cookie = (headers.get('set-cookie') ?? '').split(';')[0] ?? '';
    return client;
  }

  /** Gives the password again: acts that need it are taken for the next minutes. */
  async reauthenticate(password: string): Promise<void> {
    const { headers } = await this.expect(200, 'POST', 'auth/reauthenticate', { password });
    this.cookie = (headers.get('set-cookie') ?? '').split(';')[0] ?? '';
  }

  async call(
    method: string,
    path: string,
    body?: unknown,
    headers: Record<string, string> = {},
  ): Promise<Answer> {
    const response = await fetch(`${this.baseUrl}/api/v1/${path}`, {
      method,
      headers: {
        cookie: this.cookie,
        ...(body === undefined ? {} : { 'content-type': 'application/json' }),
        ...headers,
      },
      ...(body === undefined ? {} : { body: JSON.stringify(body) }),
    });
    const text = await response.text();
    return {
      status: response.status,
      body: text === '' ? null : JSON.parse(text),
      headers: response.headers,
    };
  }

  /** As `call`, and fails with the answer where its status is another. */
  async expect(
    status: number,
    method: string,
    path: string,
    body?: unknown,
    headers?: Record<string, string>,
  ): Promise<Answer> {
    const answer = await this.call(method, path, body, headers);
    if (answer.status !== status) {
      throw new Error(`${method} ${path}: ${answer.status} ${JSON.stringify(answer.body)}`);
    }
    return answer;
  }

  async get(path: string): Promise<Body> {
    return (await this.expect(200, 'GET', path)).body;
  }

  /** Opens the live connection; `messages` grows as they come. */
  async live(headers: Record<string, string> = {}): Promise<{ socket: WebSocket; messages: FromLive[] }> {
    const url = `${this.baseUrl.replace('http', 'ws')}/api/v1/live`;
    const socket = new WebSocket(url, { headers: { cookie: this.cookie, ...headers } });
    const messages: FromLive[] = [];
    socket.on('message', (data) => messages.push(JSON.parse((data as Buffer).toString()) as FromLive));
    await new Promise<void>((resolve, reject) => {
      socket.once('open', resolve);
      socket.once('error', reject);
    });
    return { socket, messages };
  }
}
