import { bluestem, cinderFlatStaff, highCourse, larkmoor, ortega } from './cinderFlatPeople';
import { cinderFlatVisits } from './cinderFlatVisits';
import { step, type DemoShop } from './scenario';

const cinderFlat: DemoShop = {
  slug: 'cinder-flat',
  name: 'Cinder Flat Equipment Repair',
  textName: 'Cinder Flat',
  zone: 'America/Denver',
  phone: '+13035550142',
  sender: '+13035550140',
  email: 'shop@example.com',
  address: '418 Flatiron Road',
  gateNote: {
    en: 'Gate on the left. Ring at the yellow post.',
    es: 'Portón a la izquierda. Toque en el poste amarillo.',
  },
  about: {
    en: 'Cinder Flat fixes the gas-powered gear that roofing crews run: wheelbarrow compressors first, and generators, plate compactors and saws.',
    es: 'Cinder Flat repara el equipo a gasolina de las cuadrillas de techos: primero compresores de carretilla, y también generadores, placas compactadoras y cortadoras.',
  },
  placesPerHalfDay: 4,
  pegs: { diagnosis: 4, repair: 4, test_run: 2 },
  staff: cinderFlatStaff,
  accounts: [highCourse, bluestem, larkmoor, ortega],
  visits: cinderFlatVisits,
  unansweredTexts: [{ from: 'dana', day: 0, time: '07:20', body: 'Can you keep the old reeds for me?' }],
};

const nell = 'nell@example.com';

/** Shares nothing with the first: it is here so that the wall between shops can be seen. */
const saltgrass: DemoShop = {
  slug: 'saltgrass',
  name: 'Saltgrass Small Engine',
  textName: 'Saltgrass',
  zone: 'America/Chicago',
  phone: '+18165550170',
  sender: '+18165550171',
  email: 'saltgrass@example.com',
  address: '12 Levee Street',
  gateNote: { en: 'Through the alley, blue door.', es: 'Por el callejón, puerta azul.' },
  about: {
    en: 'One bench, one mechanic, everything with a pull rope.',
    es: 'Un banco, una mecánica, todo lo que arranca con cuerda.',
  },
  placesPerHalfDay: 2,
  pegs: { diagnosis: 2, repair: 2, test_run: 1 },
  staff: [{ name: 'Nell Soto', email: nell, roles: ['owner', 'counter', 'mechanic', 'driver'] }],
  accounts: [
    {
      name: 'Pine Hollow Roofing',
      crews: [],
      people: [
        {
          key: 'ada',
          name: 'Ada Quist',
          phone: '+18165550172',
          email: 'ada@example.com',
          roles: ['manager'],
          texts: true,
        },
      ],
      machines: [
        { number: '1', kind: 'wheelbarrow_compressor', maker: 'Tarrow', model: 'W4', serial: 'TR4-100' },
        { number: '2', kind: 'wheelbarrow_compressor', maker: 'Tarrow', model: 'W4', serial: 'TR4-101' },
        { number: '3', kind: 'pressure_washer', maker: 'Tarrow', model: 'PW2', serial: 'TP2-77' },
      ],
    },
  ],
  visits: [
    {
      by: 'ada',
      booked: { day: -3, time: '10:00' },
      arrives: { day: -2, time: '09:00' },
      jobs: [
        {
          number: '1',
          complaint: 'no_pressure',
          words: 'Runs, no air',
          steps: [step('checked_in', -2, '09:04', nell), step('diagnosis', -1, '10:00', nell)],
        },
        {
          number: '2',
          complaint: 'wont_start',
          words: 'Old gas',
          steps: [
            step('checked_in', -2, '09:07', nell),
            step('diagnosis', -2, '11:00', nell),
            step('repair', -2, '13:00', nell, { says: 'Ada said yes by telephone' }),
            step('test_run', -1, '13:10', nell),
            step('ready', -1, '14:00', nell, { outcome: 'repaired', says: 'Ran two cycles' }),
          ],
        },
      ],
    },
    {
      by: 'ada',
      booked: { day: -1, time: '09:00' },
      arrives: { day: 1, time: '09:00' },
      jobs: [{ number: '3', complaint: 'leaks_oil', words: 'Drips', steps: [] }],
    },
  ],
  unansweredTexts: [],
};

export const demoShops: DemoShop[] = [cinderFlat, saltgrass];
