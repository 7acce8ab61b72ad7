import { Injectable } from '@nestjs/common'
import type {
  portalNow,
  portalResults,
  portalUtility,
  QueryOf,
  resultTrend,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { Database, notFound, toPage, type AnswerOf } from '../../platform/index.js'
import { AlertsService } from '../alerts/index.js'
import { ClientsService } from '../clients/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { ResultsService, toResultRow } from '../results/index.js'
import { PortalRepository } from './portal.repository.js'

const RECENT = 8

/** The client's own page. Every query takes the utility from the session, never from the request. */
@Injectable()
export class PortalService {
  constructor(
    private readonly db: Database,
    private readonly laboratory: LaboratoryService,
    private readonly clients: ClientsService,
    private readonly results: ResultsService,
    private readonly alerts: AlertsService,
    private readonly portal: PortalRepository,
  ) {}

  async now(actor: Actor): Promise<AnswerOf<typeof portalNow>> {
    const clientId = own(actor)
    const [laboratory, client, unanswered, recent] = await Promise.all([
      this.laboratory.get(this.db.read),
      this.clients.get(this.db.read, clientId),
      this.portal.unanswered(this.db.read, clientId),
      this.results.releasedTo(clientId, { after: undefined, limit: RECENT }),
    ])
    const alerts = await Promise.all(
      unanswered.map(async ({ id, pointId, analyte, form, certificateId }) => ({
        ...(await this.alerts.get(actor, id)),
        trend: await this.results.trend({ pointId, analyte, form } as QueryOf<typeof resultTrend>, clientId),
        certificateId,
      })),
    )
    return {
      clientName: client.name,
      laboratoryName: laboratory.name,
      laboratoryPhone: laboratory.phone,
      alerts,
      recent: recent.slice(0, RECENT).map(toResultRow),
    }
  }

  async listResults(
    actor: Actor,
    { after, limit, ...filter }: QueryOf<typeof portalResults>,
  ): Promise<AnswerOf<typeof portalResults>> {
    const rows = await this.results.releasedTo(own(actor), { after, limit, ...filter })
    return toPage(rows, { limit, key: (row) => [row.id], item: toResultRow })
  }

  async trend(actor: Actor, query: QueryOf<typeof resultTrend>): Promise<AnswerOf<typeof resultTrend>> {
    return this.results.trend(query, own(actor))
  }

  async utility(actor: Actor): Promise<AnswerOf<typeof portalUtility>> {
    const client = await this.clients.get(this.db.read, own(actor))
    return {
      name: client.name,
      systemId: client.systemId,
      address: client.address,
      programmeName: client.programmeName,
      points: client.points,
      contacts: client.contacts,
    }
  }
}

function own(actor: Actor): string {
  if (actor.clientId === null) throw notFound('utility')
  return actor.clientId
}
