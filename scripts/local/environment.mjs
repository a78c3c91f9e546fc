/** What of the caller's environment the programs we start get to see. */

const NEUTRAL = ['PATH', 'HOME', 'LANG', 'LC_ALL', 'TZ', 'TMPDIR', 'NODE_OPTIONS', 'NODE_EXTRA_CA_CERTS', 'CI', 'TERM', 'COLORTERM', 'NO_COLOR', 'FORCE_COLOR'];

/**
 * An environment of neutral variables and `more`. Nothing else of the caller's gets through, so that a database address or a
 * mail key of a real installation in the same shell can't reach the demo or the tests.
 */
export function environment(more = {}) {
  const kept = Object.fromEntries(NEUTRAL.filter((key) => process.env[key] !== undefined).map((key) => [key, process.env[key]]));
  return { ...kept, ASTRO_TELEMETRY_DISABLED: '1', ...more };
}
