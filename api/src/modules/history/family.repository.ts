import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../../platform/index.js'

/** Rows of one table. */
export interface FamilyMember {
  thing: string
  ids: string[]
}

/** What a number stands for, with everything that belongs to it. */
@Injectable()
export class FamilyRepository {
  async find(db: Executor, number: string): Promise<FamilyMember[]> {
    const { rows } = await sql<FamilyMember>`
      with batch as (select id from batches where number = ${number}),
        sample as (select id from samples where number = ${number}),
        calibration as (select id from calibrations where number = ${number}),
        alert as (select id from alerts where number = ${number}),
        lot as (select id from material_lots where number = ${number}),
        instrument as (select id from instruments where number = ${number}),
        determination as (select d.id from determinations d join sample on d.sample_id = sample.id),
        place as (
          select p.id, p.batch_id from positions p join batch on p.batch_id = batch.id
          union select p.id, p.batch_id from positions p join determination on p.determination_id = determination.id
        ),
        result as (
          select r.id from results r join batch on r.batch_id = batch.id
          union select r.id from results r join sample on r.sample_id = sample.id
        ),
        certificate as (
          select id from certificates where number = ${number}
          union select c.id from certificates c join sample on c.sample_id = sample.id
        ),
        member as (
          select 'batches' as thing, id from batch
          union all select 'batch_lots', id from batch
          union all select 'finding_actions', f.id from finding_actions f join batch on f.batch_id = batch.id
          union all select 'samples', id from sample
          union all select 'determinations', id from determination
          union all select 'positions', id from place
          union all select 'position_readings', r.id from place
            join position_readings r on r.batch_id = place.batch_id and r.position_id = place.id
          union all select 'results', id from result
          union all select 'alerts', id from alert
          union all select 'alerts', a.id from result join alerts a on a.result_id = result.id
          union all select 'certificates', id from certificate
          union all select 'certificate_openings', o.id from certificate
            join certificate_openings o on o.certificate_id = certificate.id
          union all select 'calibrations', id from calibration
          union all select 'calibration_lots', id from calibration
          union all select 'calibration_standards', s.id from calibration
            join calibration_standards s on s.calibration_id = calibration.id
          union all select 'calibration_readings', r.id from calibration
            join calibration_readings r on r.calibration_id = calibration.id
          union all select 'material_lots', id from lot
          union all select 'instruments', id from instrument
          union all select 'instrument_checks', k.id from instrument
            join instrument_checks k on k.instrument_id = instrument.id
          union all select 'signatures', s.id from signatures s join batch on s.thing = 'batches' and s.thing_id = batch.id
          union all select 'signatures', s.id from signatures s
            join calibration on s.thing = 'calibrations' and s.thing_id = calibration.id
          union all select 'signatures', s.id from signatures s
            join certificate on s.thing = 'certificates' and s.thing_id = certificate.id
        )
      select thing, array_agg(distinct id::text) as ids from member group by thing order by thing`.execute(db)
    return rows
  }
}
