import { CAR, GRAVITY_MPS2, rpmAt } from './car'
import type { CarState } from './trajectory'

/** What the engine's sensors say. */
export interface EngineReading {
  rpm: number
  oilTempC: number
  oilPressureBar: number
  coolantTempC: number
  batteryV: number
}

/**
 * A water-cooled engine with a plain sump, stepped along the log: oil warms with the load and cools with the air, its
 * pressure follows engine speed and falls with temperature, and sags when a long left-hand bend holds the oil away from
 * the pick-up.
 * @param oilStartC oil temperature at the start of the log
 * @param airC      air temperature
 */
export function makeEngine(oilStartC: number, airC: number): (state: CarState, stepS: number) => EngineReading {
  let oilC = oilStartC
  let coolantC = Math.min(86, oilStartC + 4)
  let load = 0
  let away = 0
  return (state, stepS) => {
    const rpm = state.speedMps < 2 && state.throttle === 0 ? CAR.idleRpm : rpmAt(state.speedMps, state.gear)
    load += (state.throttle * rpm / CAR.shiftUpRpm - load) * Math.min(1, stepS / 25)
    oilC += (airC + 58 + 62 * load - oilC) * Math.min(1, stepS / 110)
    coolantC += (Math.max(78, airC + 62 + 14 * load) - coolantC) * Math.min(1, stepS / 60)
    away += (Math.max(0, state.lateralMps2 / GRAVITY_MPS2 - 0.75) - away) * Math.min(1, stepS / 0.5)
    const relief = 4.6
    const pumped = 0.55 + 4.6 * rpm / CAR.shiftUpRpm - 0.014 * (oilC - 90)
    return {
      rpm,
      oilTempC: oilC,
      oilPressureBar: Math.max(0.4, Math.min(relief, pumped) - 3.2 * away),
      coolantTempC: coolantC,
      batteryV: rpm < 1200 ? 13.7 : 14.1,
    }
  }
}
