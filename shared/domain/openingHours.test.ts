import { describe, expect, it } from 'vitest';
import { openingHours } from './openingHours';

const day = [{ from: '07:00', to: '17:00' }];

describe('openingHours', () => {
  it('joins days that follow each other with the same hours', () => {
    const hours = { '1': day, '2': day, '3': day, '4': day, '5': day, '6': [], '7': [] };
    expect(openingHours(hours, 'en')).toEqual([
      { from: 'Mon', to: 'Fri', spans: [{ from: '7:00 am', to: '5:00 pm' }] },
    ]);
    expect(openingHours(hours, 'es')[0]).toMatchObject({ from: 'lun', to: 'vie' });
  });

  it('parts days with other hours, and days that a closed one lies between', () => {
    const short = [{ from: '08:00', to: '12:00' }];
    const lines = openingHours({ '1': day, '2': [], '3': day, '4': day, '6': short }, 'en');
    expect(lines.map(({ from, to }) => [from, to])).toEqual([
      ['Mon', 'Mon'],
      ['Wed', 'Thu'],
      ['Sat', 'Sat'],
    ]);
  });

  it('keeps a midday break', () => {
    const split = [
      { from: '07:00', to: '12:00' },
      { from: '13:00', to: '17:30' },
    ];
    expect(openingHours({ '2': split }, 'en')[0]?.spans).toEqual([
      { from: '7:00 am', to: '12:00 pm' },
      { from: '1:00 pm', to: '5:30 pm' },
    ]);
  });
});
