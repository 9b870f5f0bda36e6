import * as k from '#shared/contracts/calendars.ts'
import * as c from '#shared/contracts/catalogue.ts'
import * as levels from '#shared/contracts/room-levels.ts'
import * as h from '#shared/contracts/hospital.ts'
import { listBins, momentOf, viewBin } from '../counts/bin-view.service.ts'
import type { Routes } from '../http/endpoint.ts'
import * as bins from './bins.service.ts'
import * as calendars from './calendars.service.ts'
import * as hospital from './hospital.service.ts'
import * as items from './items.service.ts'
import * as places from './places.service.ts'
import * as roomLevels from './room-levels.service.ts'

export function catalogueRoutes(routes: Routes): void {
  routes.read(h.readHospital, ({ tx }) => hospital.readHospital(tx))
  routes.write(h.updateHospital, ({ tx, clock, actor, body }) => hospital.updateHospital(tx, clock, actor, body))

  routes.read(c.listWards, ({ tx, query }) => places.listWards(tx, query))
  routes.write(c.createWard, ({ tx, clock, actor, body }) => places.createWard(tx, clock, actor.id, body))
  routes.write(c.updateWard, ({ tx, clock, actor, params, body }) =>
    places.updateWard(tx, clock, actor, Number(params.id), body),
  )

  routes.read(c.listRooms, ({ tx, clock, actor, query }) => places.listRooms(tx, clock, actor, query))
  routes.write(c.createRoom, ({ tx, clock, actor, body }) => places.createRoom(tx, clock, actor.id, body))
  routes.write(c.updateRoom, ({ tx, clock, actor, params, body }) =>
    places.updateRoom(tx, clock, actor, Number(params.id), body),
  )

  routes.read(levels.readRoomLevels, ({ tx, clock, actor, params }) =>
    roomLevels.readRoomLevels(tx, clock, actor, Number(params.id)),
  )
  routes.write(levels.setRoomMode, ({ tx, clock, actor, params, body }) =>
    roomLevels.setRoomMode(tx, clock, actor, Number(params.id), body),
  )

  routes.read(c.listSuppliers, ({ tx, query }) => places.listSuppliers(tx, query))
  routes.write(c.createSupplier, ({ tx, clock, actor, body }) => places.createSupplier(tx, clock, actor.id, body))
  routes.write(c.updateSupplier, ({ tx, clock, actor, params, body }) =>
    places.updateSupplier(tx, clock, actor, Number(params.id), body),
  )

  routes.read(k.listCalendars, ({ tx, clock, query }) => calendars.listCalendars(tx, clock, query))
  routes.read(k.readCalendar, ({ tx, clock, params }) => calendars.readCalendar(tx, clock, Number(params.id)))
  routes.write(k.createCalendar, ({ tx, clock, actor, body }) => calendars.createCalendar(tx, clock, actor.id, body))
  routes.write(k.updateCalendar, ({ tx, clock, actor, params, body }) =>
    calendars.updateCalendar(tx, clock, actor.id, Number(params.id), body),
  )
  routes.write(k.importCalendar, ({ tx, clock, actor, params, body }) =>
    calendars.importCalendar(tx, clock, actor.id, Number(params.id), body.text),
  )

  routes.read(c.listItems, ({ tx, query }) => items.listItems(tx, query))
  routes.read(c.readItem, ({ tx, params }) => items.readItem(tx, Number(params.id)))
  routes.write(c.createItem, ({ tx, clock, actor, body }) => items.createItem(tx, clock, actor.id, body))
  routes.write(c.updateItem, ({ tx, clock, actor, params, body }) =>
    items.updateItem(tx, clock, actor, Number(params.id), body),
  )

  routes.read(c.listBins, async ({ tx, clock, actor, query }) => {
    const { timeZone } = await hospital.readHospital(tx)
    return listBins(tx, momentOf(clock, timeZone), actor, query)
  })
  routes.read(c.readBin, async ({ tx, clock, actor, params }) => {
    const { timeZone } = await hospital.readHospital(tx)
    return (await viewBin(tx, momentOf(clock, timeZone), actor, Number(params.id))).bin
  })
  routes.write(c.createBin, ({ tx, clock, actor, body }) => bins.createBin(tx, clock, actor, body))
  routes.write(c.updateBin, ({ tx, clock, actor, params, body }) =>
    bins.updateBin(tx, clock, actor, Number(params.id), body),
  )
}
