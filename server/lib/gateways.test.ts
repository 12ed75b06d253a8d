import { describe, expect, it } from 'vitest';
import { resultOfMailError } from './mail';
import { resultOfError } from './sms';

describe('an error of the text provider', () => {
  it.each([
    ['its refusal of the number is final', { status: 400, code: 21211 }, { kind: 'refused', code: '21211' }],
    ['its opt-out is final', { status: 400, code: 21610 }, { kind: 'refused', code: '21610' }],
    ['a rush is waited out', { status: 429, code: 20429 }, { kind: 'later', reason: '20429' }],
    [
      'wrong credentials are our fault, not the text’s',
      { status: 401, code: 20003 },
      { kind: 'later', reason: '20003' },
    ],
    ['nobody there: nothing was taken', { code: 'ECONNREFUSED' }, { kind: 'later', reason: 'ECONNREFUSED' }],
    ['its own trouble leaves it open', { status: 500, code: 20500 }, { kind: 'unknown', reason: '20500' }],
    ['a time-out leaves it open', { code: 'ECONNABORTED' }, { kind: 'unknown', reason: 'ECONNABORTED' }],
    ['a broken connection leaves it open', { code: 'ECONNRESET' }, { kind: 'unknown', reason: 'ECONNRESET' }],
    ['anything unheard of leaves it open', new Error('?'), { kind: 'unknown', reason: '?' }],
  ])('%s', (_what, error, expected) => {
    expect(resultOfError(error)).toEqual(expected);
  });
});

describe('an error of the mail server', () => {
  it.each([
    [
      'an unknown mailbox is final',
      { responseCode: 550, code: 'EENVELOPE' },
      { kind: 'refused', code: '550' },
    ],
    [
      'a busy mailbox is tried again',
      { responseCode: 451, code: 'EMESSAGE' },
      { kind: 'later', reason: '451' },
    ],
    [
      'wrong credentials are tried again',
      { responseCode: 535, code: 'EAUTH' },
      { kind: 'later', reason: '535' },
    ],
    ['a time-out is tried again', { code: 'ETIMEDOUT' }, { kind: 'later', reason: 'ETIMEDOUT' }],
  ])('%s', (_what, error, expected) => {
    expect(resultOfMailError(error)).toEqual(expected);
  });
});
