import { Module } from '@nestjs/common'
import { LaboratoryModule } from '../laboratory/index.js'
import { AuthorisationService } from './authorisation.service.js'
import { AuthorisationsRepository } from './authorisations.repository.js'
import { FirstAdministratorService } from './first-administrator.service.js'
import { InvitationsService } from './invitations.service.js'
import { LinksService } from './links.service.js'
import { OwnSecondFactorService } from './own-second-factor.service.js'
import { PassphraseHasher } from './passphrase-hasher.js'
import { PassphrasePolicy } from './passphrase-policy.js'
import { PassphraseStrategy } from './passphrase.strategy.js'
import { SecondFactorController } from './second-factor.controller.js'
import { SecondFactorsRepository } from './second-factors.repository.js'
import { SecondFactorsService } from './second-factors.service.js'
import { SecretBox } from './secret-box.js'
import { SessionController } from './session.controller.js'
import { SignInService } from './sign-in.service.js'
import { SignaturesRepository } from './signatures.repository.js'
import { SigningService } from './signing.service.js'
import { TokensRepository } from './tokens.repository.js'
import { UsersController } from './users.controller.js'
import { UsersRepository } from './users.repository.js'
import { UsersService } from './users.service.js'

@Module({
  imports: [LaboratoryModule],
  controllers: [SessionController, SecondFactorController, UsersController],
  providers: [
    UsersRepository,
    TokensRepository,
    AuthorisationsRepository,
    SignaturesRepository,
    SecondFactorsRepository,
    PassphraseHasher,
    PassphrasePolicy,
    PassphraseStrategy,
    SecretBox,
    LinksService,
    SecondFactorsService,
    OwnSecondFactorService,
    SignInService,
    InvitationsService,
    UsersService,
    FirstAdministratorService,
    SigningService,
    AuthorisationService,
  ],
  exports: [SigningService, AuthorisationService, UsersService, FirstAdministratorService, PassphraseHasher],
})
export class UsersModule {}
