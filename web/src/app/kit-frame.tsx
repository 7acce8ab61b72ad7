import { ConfigProvider, theme } from 'antd'
import { can } from '@weirlight/shared/permissions'
import { useContext, useMemo } from 'react'
import { Outlet } from 'react-router-dom'
import { SessionContext } from '../lib/session'
import { useMediaQuery } from '../lib/use-media-query'
import { StoryProvider } from '../ui/story'
import { storySlot } from './story-slot'
import { giveStylesTheNonce } from './style-nonce'
import { antdTheme, DARK } from './theme'
import { useBenchTheme } from './use-bench-theme'

// a server with a nonce in its content policy writes it here
const nonce = document.querySelector('meta[name="csp-nonce"]')?.getAttribute('content')
if (nonce) giveStylesTheNonce(nonce)

/** antd in the bench theme, and the drawer that any number opens. */
export function KitFrame() {
  const tokens = useBenchTheme()
  // null on the pages without a session
  const session = useContext(SessionContext)
  const mayReadStories = session !== null && can(session, 'story.read')
  const isStill = useMediaQuery('(prefers-reduced-motion: reduce)')
  const config = useMemo(
    () => ({
      ...antdTheme(tokens, { isStill }),
      algorithm: tokens === DARK ? theme.darkAlgorithm : theme.defaultAlgorithm,
    }),
    [tokens, isStill],
  )
  return (
    <ConfigProvider
      theme={config}
      wave={{ disabled: true }}
      button={{ autoInsertSpace: false }}
      {...(nonce ? { csp: { nonce } } : {})}
    >
      <StoryProvider slot={mayReadStories ? storySlot : null}>
        <Outlet />
      </StoryProvider>
    </ConfigProvider>
  )
}
