import type { RequestHandler } from 'express';

/**
 * An address whose percent signs encode nothing is taken as it is written: it names nothing, and is answered like any
 * other that names nothing, instead of being refused before anybody asked who calls.
 */
export const plainAddress: RequestHandler = (req, _res, next) => {
  const [path = '', ...query] = req.url.split('?');
  if (!isDecodable(path)) req.url = [path.replaceAll('%', '%25'), ...query].join('?');
  next();
};

function isDecodable(path: string): boolean {
  try {
    decodeURIComponent(path);
    return true;
  } catch {
    return false;
  }
}
