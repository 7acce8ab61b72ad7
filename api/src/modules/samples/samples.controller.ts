import { Controller } from '@nestjs/common'
import {
  addDetermination,
  applyManifest,
  correctSample,
  decideAcceptance,
  getSample,
  listSamples,
  listWaiting,
  previewManifest,
  receiveSample,
  withdrawDetermination,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import {
  CurrentActor,
  Endpoint,
  Input,
  Upload,
  type InputOf,
  type UploadedFile,
} from '../../platform/index.js'
import { ManifestsService } from './manifests.service.js'
import { ReceivingService } from './receiving.service.js'
import { SamplesService } from './samples.service.js'

@Controller()
export class SamplesController {
  constructor(
    private readonly samples: SamplesService,
    private readonly receiving: ReceivingService,
    private readonly manifests: ManifestsService,
  ) {}

  @Endpoint(listSamples)
  list(@Input() { query }: InputOf<typeof listSamples>) {
    return this.samples.list(query)
  }

  @Endpoint(getSample)
  get(@Input() { params }: InputOf<typeof getSample>) {
    return this.samples.get(params.id)
  }

  @Endpoint(receiveSample)
  receive(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof receiveSample>) {
    return this.receiving.receive(actor, body)
  }

  @Endpoint(decideAcceptance)
  decide(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof decideAcceptance>) {
    return this.samples.decide(actor, params.id, body)
  }

  @Endpoint(correctSample)
  correct(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof correctSample>) {
    return this.samples.correct(actor, params.id, body)
  }

  @Endpoint(addDetermination)
  addDetermination(
    @CurrentActor() actor: Actor,
    @Input() { params, body }: InputOf<typeof addDetermination>,
  ) {
    return this.samples.addDetermination(actor, params.id, body)
  }

  @Endpoint(withdrawDetermination)
  withdraw(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof withdrawDetermination>) {
    return this.samples.withdraw(actor, params.id, body)
  }

  @Endpoint(listWaiting)
  waiting(@Input() { query }: InputOf<typeof listWaiting>) {
    return this.samples.waiting(query)
  }

  @Endpoint(previewManifest)
  previewManifest(@CurrentActor() actor: Actor, @Upload() file: UploadedFile) {
    return this.manifests.preview(actor, file)
  }

  @Endpoint(applyManifest)
  applyManifest(@CurrentActor() actor: Actor, @Input() { params }: InputOf<typeof applyManifest>) {
    return this.manifests.apply(actor, params.id)
  }
}
