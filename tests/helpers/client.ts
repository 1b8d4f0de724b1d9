/** A browser as far as the API is concerned: keeps its cookies and says where its requests come from. */
import { base } from './base'

export interface Answer<T = unknown> {
  status: number
  /** The JSON that came back; null for none. */
  body: T
  headers: Headers
}

export interface RefusalBody { statusCode: number, statusMessage: string, data: { code: string, field?: string, help: string, details?: unknown } }

export interface RequestOptions { headers?: Record<string, string>, signal?: AbortSignal }

export class Client {
  private readonly cookies = new Map<string, string>()

  constructor(readonly baseUrl: string = base().url) {}

  get cookieHeader(): string {
    return [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  }

  setCookie(name: string, value: string): void {
    this.cookies.set(name, value)
  }

  /** Sends the request as given; `body` may be JSON, FormData or nothing. */
  async raw(method: string, path: string, body?: unknown, { headers = {}, signal }: RequestOptions = {}): Promise<Response> {
    const json = body !== undefined && !(body instanceof FormData)
    const response = await fetch(this.baseUrl + path, {
      method,
      redirect: 'manual',
      signal,
      headers: {
        origin: this.baseUrl,
        accept: 'application/json',
        ...json ? { 'content-type': 'application/json' } : {},
        ...this.cookies.size ? { cookie: this.cookieHeader } : {},
        ...headers,
      },
      body: json ? JSON.stringify(body) : body as FormData | undefined,
    })
    for (const line of response.headers.getSetCookie()) this.keep(line)
    return response
  }

  private keep(line: string): void {
    const [pair, ...attributes] = line.split(';')
    const at = pair!.indexOf('=')
    const name = pair!.slice(0, at).trim()
    const value = pair!.slice(at + 1)
    const ended = value === '' || attributes.some(attribute => /^\s*max-age=0$/i.test(attribute))
    if (ended) this.cookies.delete(name)
    else this.cookies.set(name, value)
  }

  private async json<T>(method: string, path: string, body?: unknown, options?: RequestOptions): Promise<Answer<T>> {
    const response = await this.raw(method, path, body, options)
    const text = await response.text()
    return { status: response.status, headers: response.headers, body: (text ? JSON.parse(text) : null) as T }
  }

  get<T = unknown>(path: string, options?: RequestOptions) { return this.json<T>('GET', path, undefined, options) }
  post<T = unknown>(path: string, body?: unknown, options?: RequestOptions) { return this.json<T>('POST', path, body, options) }
  put<T = unknown>(path: string, body?: unknown, options?: RequestOptions) { return this.json<T>('PUT', path, body, options) }
  patch<T = unknown>(path: string, body?: unknown, options?: RequestOptions) { return this.json<T>('PATCH', path, body, options) }
  delete<T = unknown>(path: string, body?: unknown, options?: RequestOptions) { return this.json<T>('DELETE', path, body, options) }
}
