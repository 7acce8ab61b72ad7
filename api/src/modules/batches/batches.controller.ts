import { Controller } from '@nestjs/common'
import {
  addVerification,
  applyReadings,
  changeBatch,
  changePosition,
  getBatch,
  listBatches,
  openBatch,
  previewReadings,
  recordFindingAction,
  runSheetFile,
  saveReadings,
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
import { BatchesService } from './batches.service.js'
import { OpeningService } from './opening.service.js'
import { ReadingFilesService } from './reading-files.service.js'
import { RunningService } from './running.service.js'

@Controller()
export class BatchesController {
  constructor(
    private readonly batches: BatchesService,
    private readonly opening: OpeningService,
    private readonly running: RunningService,
    private readonly files: ReadingFilesService,
  ) {}

  @Endpoint(listBatches)
  list(@Input() { query }: InputOf<typeof listBatches>) {
    return this.batches.list(query)
  }

  @Endpoint(getBatch)
  get(@CurrentActor() actor: Actor, @Input() { params }: InputOf<typeof getBatch>) {
    return this.batches.open(actor, params.id)
  }

  @Endpoint(openBatch)
  openBatch(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof openBatch>) {
    return this.opening.openBatch(actor, body)
  }

  @Endpoint(saveReadings)
  saveReadings(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof saveReadings>) {
    return this.running.saveReadings(actor, params.id, body)
  }

  @Endpoint(changePosition)
  changePosition(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof changePosition>) {
    return this.running.changePosition(actor, params.id, body)
  }

  @Endpoint(changeBatch)
  changeBatch(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof changeBatch>) {
    return this.running.changeBatch(actor, params.id, body)
  }

  @Endpoint(addVerification)
  addVerification(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof addVerification>) {
    return this.running.addVerification(actor, params.id, body)
  }

  @Endpoint(recordFindingAction)
  recordAction(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof recordFindingAction>) {
    return this.running.recordAction(actor, params.id, body)
  }

  @Endpoint(previewReadings)
  preview(
    @CurrentActor() actor: Actor,
    @Input() { params }: InputOf<typeof previewReadings>,
    @Upload() file: UploadedFile,
  ) {
    return this.files.preview(actor, params.id, file)
  }

  @Endpoint(applyReadings)
  apply(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof applyReadings>) {
    return this.files.apply(actor, params, body)
  }

  @Endpoint(runSheetFile)
  runSheet(@Input() { params }: InputOf<typeof runSheetFile>) {
    return this.files.runSheet(params.id)
  }
}
