import { expect, test } from 'vitest';
import { clientAddress } from './client-address';

test('without a trusted proxy nobody is believed', () => {
  expect(clientAddress('203.0.113.7', '198.51.100.1', 0)).toBe('203.0.113.7');
});
test('one proxy: the last entry, whatever the client wrote before it', () => {
  expect(clientAddress('10.0.0.1', '1.1.1.1, 198.51.100.9', 1)).toBe('198.51.100.9');
});
test('two proxies: the last but one', () => {
  expect(clientAddress('10.0.0.1', 'forged, 198.51.100.9, 10.0.0.2', 2)).toBe('198.51.100.9');
});
test('fewer entries than proxies: the connection itself', () => {
  expect(clientAddress('10.0.0.1', '198.51.100.9', 2)).toBe('10.0.0.1');
});
