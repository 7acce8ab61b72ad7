import { Injectable, createParamDecorator, type ExecutionContext } from '@nestjs/common'
import { AuthGuard } from '@nestjs/passport'
import { signIn } from '@weirlight/shared/contracts'
import type { FastifyRequest } from 'fastify'
import { invalidInput, ProblemError } from '../../platform/index.js'
import { toFieldProblems } from '../../platform/http/issues.js'
import type { Account } from './sign-in.service.js'

type SignInRequest = FastifyRequest & { user?: Account }

/** Guards run before the contract's check, and the strategy reads the body: so it is checked here first. */
@Injectable()
export class SignInGuard extends AuthGuard('passphrase') {
  override async canActivate(context: ExecutionContext): Promise<boolean> {
    const request = context.switchToHttp().getRequest<FastifyRequest>()
    const parsed = signIn.body.safeParse(request.body ?? {})
    if (!parsed.success) throw invalidInput(toFieldProblems(parsed.error.issues))
    request.body = parsed.data
    return (await super.canActivate(context)) === true
  }

  override handleRequest<TUser>(error: unknown, account: TUser | false): TUser {
    if (error) throw error instanceof Error ? error : new Error('The strategy failed.', { cause: error })
    if (!account)
      throw new ProblemError('wrong-passphrase', 'The e-mail address or the passphrase is not right.')
    return account
  }
}

/** The account that has just shown its passphrase. */
export const SigningIn = createParamDecorator((_: unknown, context: ExecutionContext): Account => {
  const { user } = context.switchToHttp().getRequest<SignInRequest>()
  if (!user) throw new Error('SigningIn stands only on routes behind SignInGuard.')
  return user
})
