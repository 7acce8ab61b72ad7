// `node --conditions=source --import=./source-loader.mjs main.ts`: runs the API from its sources, with the decorator
// metadata that Nest finds its constructor arguments by. For tests that start and kill a real process.
import { register } from 'node:module'

register('./source-hooks.mjs', import.meta.url)
