import { Module } from '@nestjs/common'
import { TodayController } from './today.controller.js'
import { TodayRepository } from './today.repository.js'
import { TodayService } from './today.service.js'

@Module({ controllers: [TodayController], providers: [TodayService, TodayRepository] })
export class TodayModule {}
