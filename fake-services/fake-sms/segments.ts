// GSM 03.38: the basic alphabet, and the signs that cost two septets behind an escape.
const BASIC =
  '@£$¥èéùìòÇ\nØø\rÅåΔ_ΦΓΛΩΠΨΣΘΞÆæßÉ !"#¤%&\'()*+,-./0123456789:;<=>?¡ABCDEFGHIJKLMNOPQRSTUVWXYZÄÖÑÜ§¿abcdefghijklmnopqrstuvwxyzäöñüà';
const EXTENDED = '\f^{}\\[~]|€';

/** How many segments a text takes: 160 and 153 septets, or 70 and 67 UTF-16 units where a sign is outside GSM-7. */
export function countSegments(body: string): number {
  const signs = [...body];
  const isGsm = signs.every((sign) => BASIC.includes(sign) || EXTENDED.includes(sign));
  const costs = signs.map((sign) => (isGsm ? (EXTENDED.includes(sign) ? 2 : 1) : sign.length));
  const [single, joined] = isGsm ? [160, 153] : [70, 67];
  const total = costs.reduce((sum, cost) => sum + cost, 0);
  return total <= single ? 1 : fill(costs, joined);
}

/** A sign of two units never lies across two segments. */
function fill(costs: number[], size: number): number {
  let segments = 1;
  let used = 0;
  for (const cost of costs) {
    if (used + cost > size) {
      segments += 1;
      used = 0;
    }
    used += cost;
  }
  return segments;
}
