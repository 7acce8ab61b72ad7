import { Module } from '@nestjs/common'
import { HistoryRepository } from './history.repository.js'
import { VersionCheck } from './version-check.js'

@Module({
  providers: [HistoryRepository, VersionCheck],
  exports: [VersionCheck],
})
export class HistoryModule {}
