import { expect, test } from 'vitest';
import { addressOf, networkOf } from './rateLimits';

test.each([
  ['203.0.113.77', '203.0.113'],
  ['::ffff:203.0.113.77', '203.0.113'],
  ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2'],
  ['2001:db8::6', '2001:db8:0:0'],
  ['::1', '0:0:0:0'],
  ['2001:db8:1:2::', '2001:db8:1:2'],
])('the network of %s is %s', (ip, network) => {
  expect(networkOf(ip)).toBe(network);
});

test.each([
  ['203.0.113.77', '203.0.113.77'],
  ['::ffff:203.0.113.77', '203.0.113.77'],
  ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2'],
])('what counts as the address of %s is %s', (ip, address) => {
  expect(addressOf(ip)).toBe(address);
});
