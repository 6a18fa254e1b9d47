/** A caller of the API as one person. Every method throws on an answer that is not 2xx, unless `raw` is asked. */
export interface Answer<T = unknown> {
  readonly status: number;
  readonly body: T;
  readonly headers: Headers;
}

export class ApiFailure extends Error {
  constructor(readonly status: number, readonly body: unknown, what: string) {
    super(`${what}: ${status} ${JSON.stringify(body)}`);
  }
}

async function parsed(response: Response): Promise<unknown> {
  const text = await response.text();
  if (!(response.headers.get('content-type') ?? '').includes('json')) return text;
  return JSON.parse(text);
}

export class Client {
  constructor(readonly url: string, readonly token: string | null = null) {}

  static async signIn(url: string, email: string, password: string): Promise<Client> {
    const { accessToken } = await new Client(url).post<{ accessToken: string }>('/api/session', { email, password });
    return new Client(url, accessToken);
  }

  async raw(method: string, path: string, body?: unknown, headers: Record<string, string> = {}): Promise<Answer> {
    const isForm = body instanceof FormData;
    const response = await fetch(`${this.url}${path}`, {
      method,
      headers: {
        ...(this.token === null ? {} : { authorization: `Bearer ${this.token}` }),
        ...(body === undefined || isForm ? {} : { 'content-type': 'application/json' }),
        ...headers,
      },
      body: body === undefined ? undefined : isForm || typeof body === 'string' ? body : JSON.stringify(body),
    });
    return { status: response.status, body: await parsed(response), headers: response.headers };
  }

  private async ok<T>(method: string, path: string, body?: unknown, headers?: Record<string, string>): Promise<T> {
    const answer = await this.raw(method, path, body, headers);
    if (answer.status >= 300) throw new ApiFailure(answer.status, answer.body, `${method} ${path}`);
    // The callers name the contract's type; the server's own tests hold it to that contract.
    return answer.body as T;
  }

  get<T>(path: string): Promise<T> {
    return this.ok('GET', path);
  }

  post<T>(path: string, body: unknown = {}, headers?: Record<string, string>): Promise<T> {
    return this.ok('POST', path, body, headers);
  }

  patch<T>(path: string, body: unknown): Promise<T> {
    return this.ok('PATCH', path, body);
  }

  /** Multipart: the JSON part under its name, then the files. */
  upload<T>(path: string, part: { name: string; json: unknown }, files: readonly { name: string; bytes: Uint8Array | string }[]): Promise<T> {
    return this.ok('POST', path, form(part, files));
  }
}

export function form(part: { name: string; json: unknown }, files: readonly { name: string; bytes: Uint8Array | string }[]): FormData {
  const data = new FormData();
  data.set(part.name, JSON.stringify(part.json));
  for (const file of files) data.append('files', new Blob([typeof file.bytes === 'string' ? file.bytes : new Uint8Array(file.bytes)]), file.name);
  return data;
}
