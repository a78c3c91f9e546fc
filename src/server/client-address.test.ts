import { expect, test } from 'vitest';
import { clientAddress, networkOf } from './client-address';

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
test('tries are counted by IPv4 address, and by the /64 of an IPv6 address however it is written', () => {
  expect(networkOf('203.0.113.7')).toBe('203.0.113.7');
  expect(networkOf('::ffff:203.0.113.7')).toBe('203.0.113.7');
  expect(networkOf('2001:db8:0:1:aaaa::1')).toBe('2001:db8:0:1::/64');
  expect(networkOf('2001:0DB8::1:2:3:4:5')).toBe('2001:db8:0:1::/64');
  expect(networkOf('::1')).toBe('0:0:0:0::/64');
});
