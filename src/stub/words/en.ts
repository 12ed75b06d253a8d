import stub from '../../../shared/locales/en/stub.json?raw';
import machines from '../../../shared/locales/en/machines.json?raw';
import { readWords } from './readWords';

/** The stub's words in English, as one chunk. */
export const words = readWords(stub, machines);
