import stub from '../../../shared/locales/es/stub.json?raw';
import machines from '../../../shared/locales/es/machines.json?raw';
import { readWords } from './readWords';

/** The stub's words in Spanish, as one chunk. */
export const words = readWords(stub, machines);
