import { parseArgs } from 'node:util'
import { Refusal } from './say.mjs'

/** Reads `--name value` arguments; anything unknown or missing shows the help. */
export const readArguments = ({ options, required = [], help }) => {
  let values
  try {
    values = parseArgs({ options, strict: true }).values
  } catch (error) {
    throw new Refusal(`${error.message}\n\n${help}`)
  }
  if (required.some((name) => values[name] === undefined)) throw new Refusal(help)
  return values
}
