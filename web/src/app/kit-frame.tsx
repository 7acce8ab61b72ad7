import { ConfigProvider, theme } from 'antd'
import { useMemo } from 'react'
import { Outlet } from 'react-router-dom'
import { StoryProvider } from '../ui/story'
import { storySlot } from './story-slot'
import { antdTheme, DARK } from './theme'
import { useBenchTheme } from './use-bench-theme'

// a server with a nonce in its content policy writes it here
const nonce = document.querySelector('meta[name="csp-nonce"]')?.getAttribute('content')

/** antd in the bench theme, and the drawer that any number opens. */
export function KitFrame() {
  const tokens = useBenchTheme()
  const config = useMemo(
    () => ({
      ...antdTheme(tokens),
      algorithm: tokens === DARK ? theme.darkAlgorithm : theme.defaultAlgorithm,
    }),
    [tokens],
  )
  return (
    <ConfigProvider
      theme={config}
      wave={{ disabled: true }}
      button={{ autoInsertSpace: false }}
      {...(nonce ? { csp: { nonce } } : {})}
    >
      <StoryProvider slot={storySlot}>
        <Outlet />
      </StoryProvider>
    </ConfigProvider>
  )
}
