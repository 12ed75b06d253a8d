import { parseArgs } from 'node:util';
import { Failure, failWith } from './failure.mjs';

const usage = `npm start -- [--at HH:MM] [--host ADDRESS] [--no-fakes] [--dev]
  --at 10:00       starts the demo at this time of the day
  --host 0.0.0.0   lets other machines of the network in, a telephone for example
  --no-fakes       real texts and mail, by the providers named in the environment; no demo
  --dev            hot reload`;

/** The flags of a start. @throws Failure with the usage */
export function parseFlags(args) {
  const options = {
    dev: { type: 'boolean', default: false },
    at: { type: 'string' },
    host: { type: 'string' },
    'no-fakes': { type: 'boolean', default: false },
  };
  try {
    const { values } = parseArgs({ args, options });
    if (values.at !== undefined && !/^([01]\d|2[0-3]):[0-5]\d$/.test(values.at)) {
      throw new Error(`--at takes a time such as 10:00, not "${values.at}".`);
    }
    return { dev: values.dev, at: values.at, host: values.host, fakes: !values['no-fakes'] };
  } catch (error) {
    throw new Failure(`${error.message}\n\n${usage}`);
  }
}

/** The flags of this process; ends it with the usage when they make no sense. */
export function readFlags() {
  try {
    return parseFlags(process.argv.slice(2));
  } catch (error) {
    return failWith(error);
  }
}
