import { Controller } from '@nestjs/common'
import {
  exportResults,
  getStory,
  listResults,
  releaseBatch,
  resultTrend,
  returnBatch,
  submitBatch,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { ResultsService } from './results.service.js'
import { ReviewService } from './review.service.js'
import { StoryService } from './story.service.js'

@Controller()
export class ResultsController {
  constructor(
    private readonly results: ResultsService,
    private readonly review: ReviewService,
    private readonly story: StoryService,
  ) {}

  @Endpoint(submitBatch)
  submit(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof submitBatch>) {
    return this.review.submit(actor, params.id, body)
  }

  @Endpoint(returnBatch)
  return(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof returnBatch>) {
    return this.review.return(actor, params.id, body)
  }

  @Endpoint(releaseBatch)
  release(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof releaseBatch>) {
    return this.review.release(actor, params.id, body)
  }

  @Endpoint(listResults)
  list(@Input() { query }: InputOf<typeof listResults>) {
    return this.results.list(query)
  }

  @Endpoint(resultTrend)
  trend(@Input() { query }: InputOf<typeof resultTrend>) {
    return this.results.trend(query, null)
  }

  @Endpoint(exportResults)
  export(@Input() { query }: InputOf<typeof exportResults>) {
    return this.results.export(query)
  }

  @Endpoint(getStory)
  getStory(@Input() { params }: InputOf<typeof getStory>) {
    return this.story.tell(params.id)
  }
}
