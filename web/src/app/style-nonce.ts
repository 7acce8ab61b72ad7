/**
 * The component library locks scrolling behind its dialogs with style elements that it gives no nonce, and the page's
 * content policy refuses those. Every style element our own scripts make gets the nonce; scripts get none by this.
 */
export function giveStylesTheNonce(nonce: string): void {
  const make = document.createElement.bind(document) as (
    name: string,
    options?: ElementCreationOptions,
  ) => HTMLElement
  document.createElement = ((name: string, options?: ElementCreationOptions) => {
    const made = make(name, options)
    if (made instanceof HTMLStyleElement) made.nonce = nonce
    return made
  }) as typeof document.createElement
}
