import type { DemoAccount, DemoMachine, DemoStaff } from './scenario';

const wheelbarrow = (number: string, model: 'TW-8' | 'TW-5', serial: string, crew: string): DemoMachine => ({
  number,
  kind: 'wheelbarrow_compressor',
  maker: 'Ironvale',
  model,
  serial,
  crew,
  tankLitres: model === 'TW-8' ? 30.28 : 18.93,
});
const nineG = (number: string, serial: string, crew: string): DemoMachine => ({
  number,
  kind: 'wheelbarrow_compressor',
  maker: 'Corrick',
  model: '9G',
  serial,
  crew,
  tankLitres: 34.07,
});

export const cinderFlatStaff: DemoStaff[] = [
  { name: 'Wes Calloway', email: 'wes@example.com', roles: ['owner'] },
  { name: 'Rosa Imber', email: 'rosa@example.com', roles: ['counter'] },
  { name: 'Marta Venn', email: 'marta@example.com', roles: ['mechanic'] },
  { name: 'Joel Pruett', email: 'joel@example.com', roles: ['mechanic', 'driver'] },
];

export const highCourse: DemoAccount = {
  name: 'High Course Roofing',
  crews: [
    { key: 'alder', name: 'Alder Street crew', lead: 'dana' },
    { key: 'north', name: 'North crew', lead: 'teo' },
  ],
  people: [
    {
      key: 'iris',
      name: 'Iris Holloway',
      phone: '+13035550117',
      email: 'iris@example.com',
      roles: ['manager'],
      texts: true,
    },
    {
      key: 'dana',
      name: 'Dana Ruiz',
      phone: '+13035550118',
      email: 'dana@example.com',
      roles: ['crew_lead'],
      crew: 'alder',
      texts: true,
    },
    {
      key: 'teo',
      name: 'Teo Marín',
      phone: '+13035550119',
      roles: ['crew_lead'],
      crew: 'north',
      language: 'es',
      texts: true,
    },
    { key: 'paul', name: 'Paul Astley', email: 'paul@example.com', roles: ['bookkeeper'] },
  ],
  machines: [
    wheelbarrow('6', 'TW-5', 'IV5-20117', 'alder'),
    wheelbarrow('9', 'TW-5', 'IV5-20354', 'alder'),
    wheelbarrow('11', 'TW-8', 'IV8-31002', 'north'),
    nineG('12', 'C9-7716', 'north'),
    wheelbarrow('14', 'TW-8', 'IV8-31240', 'alder'),
    wheelbarrow('17', 'TW-8', 'IV8-31377', 'alder'),
    wheelbarrow('20', 'TW-8', 'IV8-31391', 'north'),
    wheelbarrow('22', 'TW-8', 'IV8-32008', 'alder'),
    wheelbarrow('25', 'TW-8', 'IV8-32011', 'alder'),
    wheelbarrow('27', 'TW-8', 'IV8-32044', 'alder'),
    wheelbarrow('30', 'TW-8', 'IV8-32090', 'alder'),
    wheelbarrow('31', 'TW-8', 'IV8-32104', 'north'),
    { number: '3', kind: 'generator', maker: 'Pellmar', model: 'G5', serial: 'PG5-0442', crew: 'north' },
    nineG('8', 'C9-7702', 'alder'),
  ],
};

export const bluestem: DemoAccount = {
  name: 'Bluestem Roof & Gutter',
  crews: [{ key: 'quarry', name: 'Quarry Road crew', lead: 'lena' }],
  people: [
    {
      key: 'owen',
      name: 'Owen Tarr',
      phone: '+17205550131',
      email: 'owen@example.com',
      roles: ['manager'],
      texts: true,
    },
    {
      key: 'lena',
      name: 'Lena Brandt',
      phone: '+17205550132',
      roles: ['crew_lead'],
      crew: 'quarry',
      texts: true,
    },
  ],
  machines: [
    nineG('B1', 'C9-8120', 'quarry'),
    nineG('B2', 'C9-8121', 'quarry'),
    wheelbarrow('B3', 'TW-8', 'IV8-40550', 'quarry'),
    wheelbarrow('B4', 'TW-8', 'IV8-40551', 'quarry'),
    wheelbarrow('B6', 'TW-8', 'IV8-40610', 'quarry'),
    nineG('B7', 'C9-8155', 'quarry'),
    wheelbarrow('B8', 'TW-8', 'IV8-40677', 'quarry'),
    {
      number: 'B9',
      kind: 'plate_compactor',
      maker: 'Pellmar',
      model: 'P20',
      serial: 'PP20-118',
      crew: 'quarry',
    },
    {
      number: 'B10',
      kind: 'plate_compactor',
      maker: 'Pellmar',
      model: 'P20',
      serial: 'PP20-131',
      crew: 'quarry',
    },
  ],
};

export const larkmoor: DemoAccount = {
  name: 'Larkmoor Exteriors',
  crews: [{ key: 'mill', name: 'Mill crew', lead: 'samir' }],
  people: [
    {
      key: 'june',
      name: 'June Okafor',
      phone: '+17205550151',
      email: 'june@example.com',
      roles: ['manager'],
      texts: true,
    },
    // Wants no texts: told by e-mail alone.
    {
      key: 'samir',
      name: 'Samir Dell',
      phone: '+17205550152',
      email: 'samir@example.com',
      roles: ['crew_lead'],
      crew: 'mill',
    },
  ],
  machines: [
    wheelbarrow('L1', 'TW-8', 'IV8-52001', 'mill'),
    wheelbarrow('L3', 'TW-8', 'IV8-52010', 'mill'),
    wheelbarrow('L4', 'TW-8', 'IV8-52017', 'mill'),
    wheelbarrow('L5', 'TW-5', 'IV5-52030', 'mill'),
    wheelbarrow('L6', 'TW-5', 'IV5-52031', 'mill'),
    wheelbarrow('L8', 'TW-5', 'IV5-52044', 'mill'),
    nineG('L9', 'C9-9001', 'mill'),
  ],
};

export const ortega: DemoAccount = {
  name: 'D. Ortega',
  crews: [],
  people: [
    {
      key: 'ortega',
      name: 'Delia Ortega',
      phone: '+13035550160',
      roles: ['manager'],
      texts: true,
      language: 'es',
    },
  ],
  machines: [{ number: '', kind: 'generator', maker: 'Pellmar', model: 'G5', serial: 'PG5-0871' }],
};
