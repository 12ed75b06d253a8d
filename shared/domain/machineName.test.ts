import { describe, expect, it } from 'vitest';
import { machineName, makerModel } from './machineName';

const machine = { kind: 'pump', maker: 'Ironvale', model: 'TW-8', fleetNumber: '14' };

describe('machineName', () => {
  it('is the fleet number where there is one, else maker and model, else the kind', () => {
    expect(machineName(machine)).toBe('No. 14');
    expect(machineName({ ...machine, fleetNumber: '' })).toBe('Ironvale TW-8');
    expect(machineName({ kind: 'pump', maker: '', model: '', fleetNumber: '' })).toBe('pump');
  });

  it('joins maker and model without a stray space', () => {
    expect(makerModel({ maker: 'Ironvale', model: '' })).toBe('Ironvale');
    expect(makerModel({ maker: '', model: 'TW-8' })).toBe('TW-8');
    expect(makerModel({ maker: '', model: '' })).toBe('');
  });
});
