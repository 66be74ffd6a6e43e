import type * as z from 'zod/mini'
import { calculateBatch } from '../engine/batch'
import { calculateDewPoint } from '../engine/climate'
import { planDay } from '../engine/day-plan'
import { calculateEmissions } from '../engine/emissions'
import { calculateFilm } from '../engine/film'
import { calculatePotLife } from '../engine/pot-life'
import { calculatePots } from '../engine/pots'
import { workMinutes } from '../engine/pots-life'
import { calculatePour } from '../engine/pour'
import { calculateViscosity } from '../engine/viscosity'
import { overcoatWindow } from '../engine/window'
import { windowState } from '../engine/window-state'
import { minutesToMs, toIso, toMs } from '../utils/instant'
import {
  BatchCalculationAnswer,
  BatchCalculationBody,
  EmissionsCalculationAnswer,
  EmissionsCalculationBody,
  FilmCalculationAnswer,
  FilmCalculationBody,
  PotsCalculationAnswer,
  PotsCalculationBody,
  PourCalculationAnswer,
  PourCalculationBody,
} from './calculation-mixing'
import {
  DayPlanCalculationAnswer,
  DayPlanCalculationBody,
  DewPointCalculationAnswer,
  DewPointCalculationBody,
  PotLifeCalculationAnswer,
  PotLifeCalculationBody,
  ViscosityCalculationAnswer,
  ViscosityCalculationBody,
  WindowCalculationAnswer,
  WindowCalculationBody,
} from './calculation-times'

export * from './calculation-mixing'
export * from './calculation-times'

/** One calculation over HTTP: the body is parsed by `body` before `run` sees it; `run` throws EngineError for bad input. */
export interface Calculation {
  readonly body: z.ZodMiniType
  readonly answer: z.ZodMiniType
  run(body: unknown): unknown
}

function calculation<Body extends z.ZodMiniType, Answer extends z.ZodMiniType>(
  body: Body, answer: Answer, run: (body: z.infer<Body>) => z.infer<Answer>,
): { readonly body: Body, readonly answer: Answer, run(body: z.infer<Body>): z.infer<Answer> } {
  return { body, answer, run }
}

/** The engine over HTTP, by the last part of the path. */
export const calculations = {
  'batch': calculation(BatchCalculationBody, BatchCalculationAnswer, calculateBatch),
  'pour': calculation(PourCalculationBody, PourCalculationAnswer, body => calculatePour(body)),
  'film': calculation(FilmCalculationBody, FilmCalculationAnswer, calculateFilm),
  'pots': calculation(PotsCalculationBody, PotsCalculationAnswer, calculatePots),
  'pot-life': calculation(PotLifeCalculationBody, PotLifeCalculationAnswer, calculatePotLife),
  'window': calculation(WindowCalculationBody, WindowCalculationAnswer, runWindow),
  'day-plan': calculation(DayPlanCalculationBody, DayPlanCalculationAnswer, runDayPlan),
  'emissions': calculation(EmissionsCalculationBody, EmissionsCalculationAnswer, calculateEmissions),
  'viscosity': calculation(ViscosityCalculationBody, ViscosityCalculationAnswer, calculateViscosity),
  'dew-point': calculation(DewPointCalculationBody, DewPointCalculationAnswer, calculateDewPoint),
} satisfies Record<string, Calculation>

export type CalculationName = keyof typeof calculations

/** The calculation of a path, or null for an unknown name. */
export function findCalculation(name: string): Calculation | null {
  return Object.hasOwn(calculations, name) ? calculations[name as CalculationName] : null
}

function isoOrNull(at: number | null): string | null {
  return at === null ? null : toIso(at)
}

function runWindow(body: WindowCalculationBody): WindowCalculationAnswer {
  const window = overcoatWindow({
    firstSprayedAt: toMs(body.firstSprayedAt),
    lastSprayedAt: toMs(body.lastSprayedAt),
    minMs: minutesToMs(body.minMin, 'up'),
    maxMs: body.maxMin === null ? null : minutesToMs(body.maxMin),
    workLeftMs: minutesToMs(body.workLeftMin ?? '0', 'up'),
  })
  return {
    opensAt: toIso(window.opensAt),
    closesAt: isoOrNull(window.closesAt),
    closingAt: isoOrNull(window.closingAt),
    state: windowState(window, toMs(body.now)),
    empty: window.empty,
  }
}

function runDayPlan(body: DayPlanCalculationBody): DayPlanCalculationAnswer {
  const byArea = workMinutes(body.areaM2, body.paceM2PerH)
  const plan = planDay({
    steps: body.steps.map(step => ({
      name: step.name,
      workMs: minutesToMs(step.workMin ?? byArea, 'up'),
      minMs: minutesToMs(step.minMin ?? '0', 'up'),
      maxMs: step.maxMin === undefined || step.maxMin === null ? null : minutesToMs(step.maxMin),
    })),
    workingIntervals: body.workingIntervals.map(({ from, to }) => ({ from: toMs(from), to: toMs(to) })),
    from: toMs(body.from),
    todayUntil: body.todayUntil === undefined ? undefined : toMs(body.todayUntil),
  })
  return {
    starts: plan.starts?.map(placed => ({
      step: placed.step,
      name: body.steps[placed.step]?.name ?? '',
      startsAt: toIso(placed.startsAt),
      endsAt: toIso(placed.endsAt),
      opensAt: isoOrNull(placed.opensAt),
      closesAt: isoOrNull(placed.closesAt),
    })) ?? null,
    brokenBy: plan.brokenBy === null
      ? null
      : {
          step: plan.brokenBy.step,
          window: { opensAt: toIso(plan.brokenBy.window.opensAt), closesAt: isoOrNull(plan.brokenBy.window.closesAt) },
        },
    nextStart: isoOrNull(plan.nextStart),
  }
}
