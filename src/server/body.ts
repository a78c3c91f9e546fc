import { AppError } from './errors';

/**
 * The bytes of a request, refused as soon as they are known to be too many: by the declared length
 * before reading, else while reading.
 *
 * @param limit bytes
 * @throws AppError too-large
 */
export async function readBody(request: Request, limit: number): Promise<Uint8Array> {
  const tooLarge = () => new AppError('too-large', `At most ${Math.floor(limit / 1024).toLocaleString('en-US')} kB can be sent here.`);
  const declared = Number(request.headers.get('content-length') ?? 0);
  if (declared > limit) throw tooLarge();
  if (!request.body) return new Uint8Array();
  const chunks: Uint8Array[] = [];
  let size = 0;
  const reader = request.body.getReader();
  for (;;) {
    const { done, value } = await reader.read();
    if (done) break;
    size += value.byteLength;
    if (size > limit) {
      await reader.cancel().catch(() => undefined);
      throw tooLarge();
    }
    chunks.push(value);
  }
  if (chunks.length === 1) return chunks[0]!;
  const all = new Uint8Array(size);
  let offset = 0;
  for (const c of chunks) {
    all.set(c, offset);
    offset += c.byteLength;
  }
  return all;
}

/**
 * A JSON or urlencoded body as a plain value. In urlencoded bodies a dotted name becomes nesting
 * and a repeated one a list.
 *
 * @throws AppError bad-request
 */
export function parseBody(bytes: Uint8Array, contentType: string): unknown {
  const text = new TextDecoder('utf-8', { fatal: false }).decode(bytes);
  const kind = contentType.split(';')[0]!.trim().toLowerCase();
  if (kind === 'application/x-www-form-urlencoded') {
    const out: Record<string, unknown> = {};
    for (const [name, value] of new URLSearchParams(text)) {
      let at: Record<string, unknown> = out;
      const parts = name.split('.');
      const last = parts.pop()!;
      if ([...parts, last].some((p) => p === '__proto__' || p === 'constructor' || p === 'prototype')) throw unreadable();
      for (const p of parts) at = (at[p] ??= {}) as Record<string, unknown>;
      const before = at[last];
      at[last] = before === undefined ? value : Array.isArray(before) ? [...before, value] : [before, value];
    }
    return out;
  }
  if (bytes.byteLength === 0) return {};
  if (kind !== 'application/json') throw new AppError('bad-request', 'Send JSON.');
  try {
    return JSON.parse(text);
  } catch {
    throw unreadable();
  }
}

function unreadable(): AppError {
  return new AppError('bad-request', 'What was sent could not be read.');
}
