/** `-3.6 %` with the sign that is as wide as a plus. For reading, never for what is sent. */
export const trueMinus = (text: string): string => text.replace(/^-/, '−')
