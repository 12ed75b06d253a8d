import { describe, expect, it } from 'vitest';
import { BookBody, FindStubBody, MACHINES_MAX } from './booking';

const id = '0b0f7f3e-8f0e-4a53-9d6e-3b9f0c7d1a11';
const machine = { from: 'new', kind: 'pump', complaintKindId: id };
const guest = {
  name: 'Dana Ruiz',
  accountName: 'High Course Roofing',
  phone: '(303) 555-0118',
  email: 'dana@example.com',
  requestId: id,
  code: '123 456',
};
const body = {
  arrivesAt: '2026-12-03T09:00:00-07:00',
  machines: [machine],
  language: 'en',
  textConsent: true,
  guest,
};
const paths = (given: object) =>
  BookBody.safeParse({ ...body, ...given }).error?.issues.map((issue) => issue.path.join('.')) ?? [];

describe('a booking', () => {
  it('is read to what the server keeps', () => {
    const read = BookBody.parse(body);
    expect(read.guest).toMatchObject({ phone: '+13035550118', code: '123456' });
    expect(read.machines[0]).toMatchObject({ maker: '', words: '' });
    expect(read.note).toBe('');
  });

  it('needs no guest from whoever is signed in', () => {
    expect(paths({ guest: undefined })).toEqual([]);
  });

  it('takes a machine of the fleet or a new one, at least one and at most twelve', () => {
    expect(paths({ machines: [{ from: 'fleet', machineId: id, complaintKindId: id }] })).toEqual([]);
    expect(paths({ machines: Array(MACHINES_MAX).fill(machine) })).toEqual([]);
    expect(paths({ machines: [] })).toEqual(['machines']);
    expect(paths({ machines: Array(MACHINES_MAX + 1).fill(machine) })).toEqual(['machines']);
    expect(paths({ machines: [{ ...machine, kind: 'lawn mower' }] })).toEqual(['machines.0.kind']);
    expect(paths({ machines: [{ from: 'fleet', complaintKindId: id }] })).toEqual(['machines.0.machineId']);
  });

  it('needs a way to reach the guest: consent to texts, or an address', () => {
    const silent = { ...guest, email: '' };
    expect(paths({ textConsent: false, guest: silent })).toEqual(['guest.email']);
    expect(paths({ textConsent: true, guest: silent })).toEqual([]);
    expect(paths({ textConsent: false })).toEqual([]);
  });

  it('asks for the consent’s yes or no and assumes neither', () => {
    expect(paths({ textConsent: undefined })).toEqual(['textConsent']);
    expect(paths({ textConsent: 'yes' })).toEqual(['textConsent']);
  });

  it('takes nothing that it does not know', () => {
    expect(BookBody.safeParse({ ...body, shopId: id }).success).toBe(false);
    expect(BookBody.safeParse({ ...body, guest: { ...guest, roles: ['owner'] } }).success).toBe(false);
  });
});

describe('finding a stub', () => {
  it('takes four digits and nothing else', () => {
    const read = (lastFour: string) => FindStubBody.safeParse({ code: '7K4-QM2', lastFour }).success;
    expect(['0118', ' 0118 '].map(read)).toEqual([true, true]);
    expect(['118', '01188', 'abcd', '٠١١٨', ''].map(read)).toEqual([false, false, false, false, false]);
  });
});
