/** Why a move is refused, in the user's words. */
export class MoveRefused extends Error {
  constructor(
    readonly code: 'not-allowed-now' | 'own-work',
    message: string,
  ) {
    super(message)
    this.name = 'MoveRefused'
  }
}

interface Move<State extends string> {
  readonly from: readonly State[]
  readonly to: State
  /** completes “This batch cannot be released: ” */
  readonly done: string
}

/**
 * A thing's states and its named moves. Pure: `move` gives the next state or throws `MoveRefused`
 * with a sentence; nothing is written here.
 */
export function defineStates<State extends string, Name extends string>(machine: {
  thing: string
  words: Record<State, string>
  moves: Record<Name, Move<State>>
}) {
  return {
    ...machine,
    may(state: State, name: Name): boolean {
      return machine.moves[name].from.includes(state)
    },
    move(state: State, name: Name): State {
      const move = machine.moves[name]
      if (move.from.includes(state)) return move.to
      throw new MoveRefused(
        'not-allowed-now',
        `This ${machine.thing} is ${machine.words[state]}; only one that is ${move.from
          .map((from) => machine.words[from])
          .join(' or ')} can be ${move.done}.`,
      )
    },
  }
}

/** Whoever prepared a thing never signs it. */
export function refuseOwnWork(input: {
  actorId: string
  preparedBy: readonly string[]
  thing: string
}): void {
  if (!input.preparedBy.includes(input.actorId)) return
  throw new MoveRefused('own-work', `You prepared this ${input.thing}; somebody else must sign it.`)
}
