/**
 * A shop's number as people read it. The library of phone numbers is larger than this whole page, and every shop's
 * number is North American; anything else is shown as it stands.
 */
export function phoneWords(e164: string): string {
  const parts = /^\+1(\d{3})(\d{3})(\d{4})$/.exec(e164);
  return parts ? `(${parts[1]}) ${parts[2]}-${parts[3]}` : e164;
}
