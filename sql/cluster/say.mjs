// What the launchers print. Progress goes to stdout, one line a step, so that a log reads like the screen.

const isColoured = process.stdout.isTTY && !process.env.NO_COLOR
const paint = (code, text) => (isColoured ? `\u001b[${code}m${text}\u001b[0m` : text)

export const bold = (text) => paint(1, text)
export const red = (text) => paint(31, text)
export const green = (text) => paint(32, text)
export const quiet = (text) => paint(2, text)

export const say = (text = '') => process.stdout.write(`${text}\n`)
export const warn = (text) => process.stdout.write(`${red('!')} ${text}\n`)

export const seconds = (sinceMs) => `${((performance.now() - sinceMs) / 1000).toFixed(1)} s`

/** Runs one step, saying what is being done and, when it took a while, how long. */
export const step = async (text, work) => {
  const begun = performance.now()
  say(`${quiet('·')} ${text} …`)
  const result = await work()
  if (performance.now() - begun > 2000) say(quiet(`  ${text}: ${seconds(begun)}`))
  return result
}

/** A failure the user can act on: its message is shown as it is, without a stack. */
export class Refusal extends Error {}

/** Prints a failure the way the user needs it and gives the exit code. */
export const explain = (error) => {
  if (error instanceof Refusal) {
    process.stderr.write(`\n${red(error.message)}\n`)
    return 1
  }
  process.stderr.write(`\n${red('Something went wrong that this program did not expect.')}\n`)
  process.stderr.write(`${error?.stack ?? error}\n`)
  return 1
}
