import { Controller } from '@nestjs/common'
import {
  exportHistory,
  historyFilters,
  listHistory,
  listSeals,
  verifySeals,
} from '@weirlight/shared/contracts'
import { Endpoint, Input, type InputOf } from '../../platform/index.js'
import { HistoryService } from './history.service.js'
import { SealsPageService } from './seals-page.service.js'

@Controller()
export class HistoryController {
  constructor(
    private readonly history: HistoryService,
    private readonly seals: SealsPageService,
  ) {}

  @Endpoint(listHistory)
  list(@Input() { query }: InputOf<typeof listHistory>) {
    return this.history.list(query)
  }

  @Endpoint(historyFilters)
  filters() {
    return this.history.filters()
  }

  @Endpoint(exportHistory)
  export(@Input() { query }: InputOf<typeof exportHistory>) {
    return this.history.export(query)
  }

  @Endpoint(listSeals)
  listSeals(@Input() { query }: InputOf<typeof listSeals>) {
    return this.seals.list(query)
  }

  @Endpoint(verifySeals)
  checkSeals() {
    return this.seals.check()
  }
}
