/** Calls of the API as the signed-in person: the access token in memory, refreshed once when it has run out. */
import { problem, type Problem } from '@strainwright/common/contract/wire';
import type { z } from 'zod';

let accessToken: string | null = null;
const listeners = new Set<() => void>();

export function setAccessToken(token: string | null): void {
  accessToken = token;
}

export function getAccessToken(): string | null {
  return accessToken;
}

/** Told when the sign-in has ended and cannot be renewed. */
export function onSignedOut(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

export class ApiProblem extends Error {
  readonly status: number;
  readonly code: string;
  readonly errors: readonly { path: string; message: string }[];

  constructor(document: Problem) {
    super(document.detail);
    this.name = 'ApiProblem';
    this.status = document.status;
    this.code = document.code;
    this.errors = document.errors ?? [];
  }
}

export class NetworkLost extends Error {
  constructor() {
    super('The server cannot be reached. What you typed is kept; try again when the network is back.');
    this.name = 'NetworkLost';
  }
}

let refreshing: Promise<boolean> | null = null;

/** Renews the access token by the refresh cookie; one at a time, across tabs too, since each refresh uses its cookie up. */
export function refreshSession(): Promise<boolean> {
  refreshing ??= withLock(async () => {
    const response = await fetch('/api/session/refresh', { method: 'POST' }).catch(() => null);
    if (response === null) throw new NetworkLost();
    if (!response.ok) return false;
    const { accessToken: token } = (await response.json()) as { accessToken: string };
    setAccessToken(token);
    return true;
  }).finally(() => {
    refreshing = null;
  });
  return refreshing;
}

function withLock<T>(work: () => Promise<T>): Promise<T> {
  if (!('locks' in navigator)) return work();
  return new Promise<T>((resolve, reject) => {
    void navigator.locks.request('strainwright-refresh', () => work().then(resolve, reject));
  });
}

async function once(method: string, path: string, body: unknown, headers: Record<string, string>): Promise<Response> {
  const isForm = body instanceof FormData;
  try {
    return await fetch(path, {
      method,
      headers: { ...(accessToken === null ? {} : { authorization: `Bearer ${accessToken}` }), ...(body === undefined || isForm ? {} : { 'content-type': 'application/json' }), ...headers },
      body: body === undefined ? undefined : isForm ? body : JSON.stringify(body),
    });
  } catch {
    throw new NetworkLost();
  }
}

async function asProblem(response: Response): Promise<ApiProblem> {
  const parsed = problem.safeParse(await response.json().catch(() => null));
  if (parsed.success) return new ApiProblem(parsed.data);
  return new ApiProblem({ type: '', title: '', status: response.status, code: 'unknown', detail: `The server answered ${response.status}.` });
}

/** @throws ApiProblem for an answer that is an error, NetworkLost when there is none */
export async function send(method: string, path: string, body?: unknown, headers: Record<string, string> = {}): Promise<Response> {
  let response = await once(method, path, body, headers);
  if (response.status === 401 && path !== '/api/session') {
    if (await refreshSession()) response = await once(method, path, body, headers);
    else for (const listener of listeners) listener();
  }
  if (!response.ok) throw await asProblem(response);
  return response;
}

/** Calls and parses the answer by the contract. */
export async function call<T>(schema: z.ZodType<T>, method: string, path: string, body?: unknown, headers?: Record<string, string>): Promise<T> {
  const response = await send(method, path, body, headers);
  return schema.parse(await response.json());
}

/** Saves a file of the API under its own name. */
export async function download(path: string, name: string): Promise<void> {
  const blob = await (await send('GET', path)).blob();
  const url = URL.createObjectURL(blob);
  const link = document.createElement('a');
  link.href = url;
  link.download = name;
  link.click();
  URL.revokeObjectURL(url);
}

/** Uploads a form and tells how much of it has gone. */
export async function upload<T>(schema: z.ZodType<T>, path: string, form: FormData, headers: Record<string, string>, onProgress: (fraction: number) => void): Promise<T> {
  if (accessToken === null) await refreshSession();
  const { status, text } = await new Promise<{ status: number; text: string }>((resolve, reject) => {
    const request = new XMLHttpRequest();
    request.open('POST', path);
    if (accessToken !== null) request.setRequestHeader('authorization', `Bearer ${accessToken}`);
    for (const [name, value] of Object.entries(headers)) request.setRequestHeader(name, value);
    request.upload.onprogress = (event) => event.lengthComputable && onProgress(event.loaded / event.total);
    request.onload = () => resolve({ status: request.status, text: request.responseText });
    request.onerror = () => reject(new NetworkLost());
    request.send(form);
  });
  if (status === 401 && (await refreshSession())) return upload(schema, path, form, headers, onProgress);
  const json: unknown = JSON.parse(text);
  if (status >= 400) throw new ApiProblem(problem.parse(json));
  return schema.parse(json);
}
