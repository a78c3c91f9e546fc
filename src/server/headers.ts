import island from 'astro/runtime/server/astro-island.prebuilt.js';
import { ISLAND_STYLES } from 'astro/runtime/server/astro-island-styles.js';
import idle from 'astro/runtime/client/idle.prebuilt.js';
import load from 'astro/runtime/client/load.prebuilt.js';
import only from 'astro/runtime/client/only.prebuilt.js';
import visible from 'astro/runtime/client/visible.prebuilt.js';
import { createHash } from 'node:crypto';
import { isHttps } from './environment';
import { singleton } from './singleton';

function sha256(text: string): string {
  return `'sha256-${createHash('sha256').update(text).digest('base64')}'`;
}

/**
 * The headers of every answer: pages, endpoints, files, cached bytes and streams alike.
 *
 * The only inline scripts and styles are the framework's own island starters, whose hashes are
 * computed from the very package that prints them.
 */
export function securityHeaders(): Record<string, string> {
  return singleton('headers', () => {
    const script = [island, idle, load, only, visible].map(sha256).join(' ');
    return {
      'content-security-policy': [
        "default-src 'none'",
        `script-src 'self' ${script}`,
        `style-src 'self' ${sha256(ISLAND_STYLES)}`,
        "img-src 'self' data: blob:",
        "font-src 'self'",
        "connect-src 'self'",
        "manifest-src 'self'",
        "worker-src 'self'",
        "form-action 'self'",
        "frame-ancestors 'none'",
        "base-uri 'none'",
        "object-src 'none'",
        ...(isHttps() ? ['upgrade-insecure-requests'] : []),
      ].join('; '),
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'strict-origin-when-cross-origin',
      'x-frame-options': 'DENY',
      'cross-origin-opener-policy': 'same-origin',
      'cross-origin-resource-policy': 'same-origin',
      'permissions-policy': 'camera=(self), geolocation=(), microphone=(), payment=(), usb=()',
      ...(isHttps() ? { 'strict-transport-security': 'max-age=63072000; includeSubDomains' } : {}),
    };
  });
}
