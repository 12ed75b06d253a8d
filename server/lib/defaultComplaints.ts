/** What customers of such a shop usually complain of, in plain words. A new shop begins with this list. */
export const DEFAULT_COMPLAINTS: readonly { key: string; en: string; es: string }[] = [
  { key: 'wont_start', en: "Won't start", es: 'No arranca' },
  { key: 'no_pressure', en: 'No pressure', es: 'No da presión' },
  { key: 'slow_to_build', en: 'Slow to build pressure', es: 'Tarda en cargar' },
  { key: 'leaks_air', en: 'Leaks air', es: 'Pierde aire' },
  { key: 'leaks_oil', en: 'Leaks oil or fuel', es: 'Pierde aceite o gasolina' },
  { key: 'wont_idle', en: "Won't speed up or idle down", es: 'No sube o no baja de vueltas' },
  { key: 'noisy', en: 'Noisy or shakes', es: 'Hace ruido o vibra' },
  { key: 'other', en: 'Something else', es: 'Otra cosa' },
];
