import '../ui/styles/fonts.css'
import '../ui/styles/base.css'
import '../ui/styles/frame.css'
import '../ui/styles/sheet.css'
import { StrictMode } from 'react'
import { createRoot } from 'react-dom/client'
import { config } from 'zod'
import { App } from './app'

// zod would otherwise try to compile code at run time, which the content security policy forbids
config({ jitless: true })

const root = document.getElementById('root')
if (!root) throw new Error('The page has no place to draw on.')
createRoot(root).render(
  <StrictMode>
    <App />
  </StrictMode>,
)
