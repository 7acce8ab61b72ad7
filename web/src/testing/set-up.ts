import { cleanup } from '@testing-library/react'
import { afterEach } from 'vitest'

// Testing Library would say so itself if the test functions were global
Object.assign(globalThis, { IS_REACT_ACT_ENVIRONMENT: true })

afterEach(cleanup)

// jsdom has neither; antd and the theme ask for both
if (!window.matchMedia) {
  window.matchMedia = (query) => ({
    matches: false,
    media: query,
    onchange: null,
    addEventListener: () => undefined,
    removeEventListener: () => undefined,
    addListener: () => undefined,
    removeListener: () => undefined,
    dispatchEvent: () => false,
  })
}
if (!('ResizeObserver' in window)) {
  class QuietResizeObserver implements ResizeObserver {
    observe() {}
    unobserve() {}
    disconnect() {}
  }
  Object.defineProperty(window, 'ResizeObserver', { value: QuietResizeObserver })
}

// jsdom computes no style of a pseudo element, and says so at length
const { getComputedStyle } = window
window.getComputedStyle = (element) => getComputedStyle(element)
