import { afterEach, describe, expect, it, vi } from 'vitest';
import { ApiProblem, callApi, fieldMessages } from './api';

const fetchMock = vi.fn<typeof fetch>();
vi.stubGlobal('fetch', fetchMock);
afterEach(() => fetchMock.mockReset());

const refusal = (promise: Promise<unknown>): Promise<ApiProblem> =>
  promise.then(
    () => {
      throw new Error('expected a refusal');
    },
    (error: unknown) => {
      if (error instanceof ApiProblem) return error;
      throw error;
    },
  );

describe('callApi', () => {
  it('sends and returns JSON', async () => {
    fetchMock.mockResolvedValue(Response.json({ version: 3 }));
    const answer = await callApi<{ version: number }>('POST', '/api/x', { reading: 287 }, { headers: { 'idempotency-key': 'k' } });
    expect(answer).toEqual({ version: 3 });
    expect(fetchMock.mock.calls[0]?.[1]).toMatchObject({
      method: 'POST',
      body: '{"reading":287}',
      credentials: 'same-origin',
      headers: { 'content-type': 'application/json', 'idempotency-key': 'k' },
    });
  });

  it('returns undefined for an empty answer', async () => {
    fetchMock.mockResolvedValue(new Response(null, { status: 204 }));
    expect(await callApi('DELETE', '/api/x')).toBeUndefined();
  });

  it('throws the problem with its fields and whatever more it carries', async () => {
    fetchMock.mockResolvedValue(
      Response.json(
        {
          type: '/problems#stale',
          title: 'Somebody else kept another value',
          status: 409,
          detail: 'Which is right?',
          code: 'stale',
          fields: [{ path: 'reading', message: 'Kept as 278.' }, { nonsense: true }],
          current: { reading: 278 },
        },
        { status: 409, headers: { 'content-type': 'application/problem+json' } },
      ),
    );
    const problem = await refusal(callApi('PUT', '/api/x', {}));
    expect(problem).toMatchObject({ status: 409, code: 'stale', detail: 'Which is right?', fields: [{ path: 'reading' }] });
    expect(problem.extra['current']).toEqual({ reading: 278 });
    expect(problem.fields).toHaveLength(1);
  });

  it('calls a network that is not there offline', async () => {
    fetchMock.mockRejectedValue(new TypeError('Failed to fetch'));
    expect(await refusal(callApi('GET', '/api/x'))).toMatchObject({ status: 0, code: 'offline' });
  });

  it('lets an aborted call be just that', async () => {
    const stop = new AbortController();
    const reason = new DOMException('stopped', 'AbortError');
    fetchMock.mockImplementation(() => {
      stop.abort(reason);
      return Promise.reject(reason);
    });
    await expect(callApi('GET', '/api/x', undefined, { signal: stop.signal })).rejects.toBe(reason);
  });

  it('never takes a page of HTML for an answer', async () => {
    fetchMock.mockResolvedValue(new Response('<html>', { status: 200 }));
    expect(await refusal(callApi('GET', '/api/x'))).toMatchObject({ status: 502, code: 'unexpected' });
    fetchMock.mockResolvedValue(new Response('<html>', { status: 503 }));
    expect(await refusal(callApi('GET', '/api/x'))).toMatchObject({ status: 503, code: 'unexpected' });
  });
});

describe('fieldMessages', () => {
  it('gives them by field', () => {
    const fields = [
      { path: 'a', message: 'One.' },
      { path: 'a', message: 'Two.' },
      { path: 'b.c', message: 'Three.' },
    ];
    expect(fieldMessages({ fields })).toEqual({ a: 'One. Two.', 'b.c': 'Three.' });
  });
});
