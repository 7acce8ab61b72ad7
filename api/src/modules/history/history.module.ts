import { Module } from '@nestjs/common'
import { HistoryRepository } from './history.repository.js'

@Module({ providers: [HistoryRepository] })
export class HistoryModule {}
