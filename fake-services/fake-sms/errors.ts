/** What the provider answers instead of a message: its own code beside the HTTP status. */
export interface ProviderError {
  status: number;
  code: number;
  message: string;
}

/** The answer's body, as the provider words its shape. */
export function errorBody({ status, code, message }: ProviderError): Record<string, string | number> {
  return { code, message, more_info: `https://www.twilio.com/docs/errors/${code}`, status };
}

const refused = (code: number, message: string): ProviderError => ({ status: 400, code, message });

/** The provider's published codes, by what went wrong. */
export const providerErrors = {
  notAuthenticated: { status: 401, code: 20003, message: 'Authenticate' },
  notFound: (path: string): ProviderError => ({
    status: 404,
    code: 20404,
    message: `The requested resource ${path} was not found`,
  }),
  tooManyRequests: { status: 429, code: 20429, message: 'Too Many Requests' },
  internal: { status: 500, code: 20500, message: 'An internal server error has occurred' },
  unavailable: { status: 503, code: 20503, message: 'Service Unavailable' },
  noTo: refused(21604, "A 'To' phone number is required."),
  noFrom: refused(21603, "A 'From' phone number is required."),
  badTo: (to: string): ProviderError => refused(21211, `Invalid 'To' Phone Number: ${to}`),
  badFrom: (from: string): ProviderError => refused(21212, `Invalid 'From' Phone Number: ${from}`),
  noBody: refused(21602, 'Message body is required.'),
  bodyTooLong: refused(21617, 'The concatenated message body exceeds the 1600 character limit'),
  optedOut: refused(21610, 'Attempt to send to unsubscribed recipient'),
  notMobile: (to: string): ProviderError => refused(21614, `'To' number is not a valid mobile number: ${to}`),
} as const;
