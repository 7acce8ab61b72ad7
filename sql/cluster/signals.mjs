import { isRunning, killRunning, npmAbove } from './processes.mjs'
import { explain, say } from './say.mjs'

/**
 * Runs a launcher's work so that its `undo` happens whatever ends it: success, failure, Ctrl-C, a closed
 * terminal. `work` gives the exit code.
 */
export const runToEnd = async ({ undo, work, onInterrupt }) => {
  let isEnding = false
  const end = async (code) => {
    if (isEnding) return
    isEnding = true
    killRunning()
    let exitCode = code
    try {
      await undo.run()
    } catch (error) {
      exitCode = explain(error) || exitCode
    }
    process.exit(exitCode)
  }
  const interrupt = (code) => {
    if (isEnding) return
    say(`\nStopping …`)
    void end(onInterrupt?.() ?? code)
  }
  for (const [signal, code] of Object.entries({ SIGINT: 130, SIGTERM: 143, SIGHUP: 129 })) {
    process.on(signal, () => interrupt(code))
  }
  // npm passes SIGTERM on to its shell, which dies of it without a word to this program.
  const npm = npmAbove()
  if (npm) setInterval(() => isRunning(npm) || interrupt(143), 500).unref()
  try {
    await end(await work())
  } catch (error) {
    // What the signal has cut short fails; that failure is no news.
    if (!isEnding) await end(explain(error))
  }
}
