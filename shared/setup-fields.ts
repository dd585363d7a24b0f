import { CORNERS, type CornerKey, type Sheet, type SheetCorner } from './schemas/setups'
import { asSentence } from './utils/format'

/** Where on the car a setting sits. */
export type SetupGroup = CornerKey | 'front' | 'rear' | 'car'

/** One setting of a sheet: where it is stored, how it is called, and how it is shown. */
export interface SetupField {
  /** Dotted path within a sheet, as in the errors of a form. */
  path: string
  /** Short, for a field beneath the heading of its group: `Spring`. */
  label: string
  /** With its place, for a list of changes: `Rear left spring`. */
  fullLabel: string
  /** Unit in which answers have it and metric sheets show it; '' for words. */
  unit: string
  group: SetupGroup
  /** Stored figure divided by the figure in `unit`: 100 for pressures, which are kept in kPa. */
  scale: number
  /** Whether the figure may be below zero. */
  signed: boolean
  /** Whether a figure above zero is written with its sign. */
  plus: boolean
  kind: 'number' | 'text'
}

export const CORNER_NAMES: Record<CornerKey, string> = {
  fl: 'front left',
  fr: 'front right',
  rl: 'rear left',
  rr: 'rear right',
}

type CornerField = Pick<SetupField, 'label' | 'unit'> & Partial<Pick<SetupField, 'scale' | 'signed' | 'plus'>>
  & { key: keyof SheetCorner, long: string }

/** The settings of a corner, in the order in which a sheet is filled in. */
export const CORNER_FIELDS: readonly CornerField[] = [
  { key: 'coldKpa', label: 'Cold', long: 'cold pressure', unit: 'bar', scale: 100 },
  { key: 'targetHotKpa', label: 'Hot, target', long: 'target hot pressure', unit: 'bar', scale: 100 },
  { key: 'camberDeg', label: 'Camber', long: 'camber', unit: '°', signed: true },
  { key: 'casterDeg', label: 'Caster', long: 'caster', unit: '°', signed: true },
  { key: 'toeMm', label: 'Toe', long: 'toe', unit: 'mm', signed: true, plus: true },
  { key: 'springNpmm', label: 'Spring', long: 'spring', unit: 'N/mm' },
  { key: 'bumpClicks', label: 'Bump', long: 'bump', unit: 'clicks' },
  { key: 'reboundClicks', label: 'Rebound', long: 'rebound', unit: 'clicks' },
  { key: 'rideHeightMm', label: 'Ride height', long: 'ride height', unit: 'mm' },
]

function corner(group: CornerKey): SetupField[] {
  const place = CORNER_NAMES[group]
  return CORNER_FIELDS.map(field => ({
    path: `corners.${group}.${field.key}`,
    label: field.label,
    fullLabel: asSentence(`${place} ${field.long}`),
    unit: field.unit,
    group,
    scale: field.scale ?? 1,
    signed: field.signed ?? false,
    plus: field.plus ?? false,
    kind: 'number',
  }))
}

type Rest = Partial<Pick<SetupField, 'kind' | 'signed'>>

function single(path: string, label: string, unit: string, group: SetupGroup, rest: Rest = {}): SetupField {
  return { path, label, fullLabel: label, unit, group, scale: 1, signed: false, plus: false, kind: 'number', ...rest }
}

/** Every setting of a sheet but its notes: corners from front left to rear right, axles, whole car. */
export const SETUP_FIELDS: readonly SetupField[] = [
  ...CORNERS.flatMap(corner),
  single('axles.front.barMm', 'Front bar', 'mm', 'front'),
  single('axles.rear.barMm', 'Rear bar', 'mm', 'rear'),
  single('car.brakeBiasPct', 'Brake bias', '% front', 'car'),
  single('car.frontPads', 'Front pads', '', 'car', { kind: 'text' }),
  single('car.rearPads', 'Rear pads', '', 'car', { kind: 'text' }),
  single('car.splitterMm', 'Splitter', 'mm out', 'car', { signed: true }),
  single('car.wingDeg', 'Rear wing', '°', 'car', { signed: true }),
  single('car.ballastKg', 'Ballast', 'kg', 'car'),
]

/** A setting in the unit of its field; null where nothing was filled in. */
export type SettingValue = number | string | null

/** The value of a field of a sheet, in the unit of the field. */
export function settingOf(sheet: Sheet, field: Pick<SetupField, 'path' | 'scale'>): SettingValue {
  let value: unknown = sheet
  for (const key of field.path.split('.')) value = (value as Record<string, unknown> | undefined)?.[key]
  if (typeof value === 'string') return value === '' ? null : value
  // 2.1 bar is kept as 210 kPa; the division must not show as 2.1000000000000001. Fourteen digits are kept, since a
  // figure that was typed in another unit is turned back from them.
  return typeof value === 'number' && Number.isFinite(value) ? Number((value / field.scale).toPrecision(14)) : null
}

/** One thing that differs between two sheets. */
export interface SheetDifference {
  label: string
  unit: string
  a: SettingValue
  b: SettingValue
}

interface Changed extends SheetDifference {
  field: SetupField
}

/**
 * What differs between two sheets, in the order of the sheet. Left and right of an axle that went from the same figure
 * to the same figure are one line (`Rear spring`). Clicks counted from the other end are a difference of their own.
 * Notes are not settings.
 * @param a the sheet compared with, for example the revision before
 * @param b the sheet looked at
 */
export function sheetDifferences(a: Sheet, b: Sheet): SheetDifference[] {
  const changed: Changed[] = SETUP_FIELDS
    .map(field => ({ field, label: field.fullLabel, unit: field.unit, a: settingOf(a, field), b: settingOf(b, field) }))
    .filter(difference => difference.a !== difference.b)
  const found = joinSides(changed).map(({ label, unit, a: from, b: to }) => ({ label, unit, a: from, b: to }))
  if (a.clicksFrom !== b.clicksFrom) found.push({ label: 'Clicks counted from', unit: '', a: a.clicksFrom, b: b.clicksFrom })
  return found
}

/** Makes one line of left and right where both changed alike. */
function joinSides(changed: readonly Changed[]): Changed[] {
  const taken = new Set<Changed>()
  const out: Changed[] = []
  for (const one of changed) {
    if (taken.has(one)) continue
    const path = otherSide(one.field.path)
    const other = path === one.field.path ? undefined : changed.find(candidate => candidate.field.path === path)
    if (other && other.a === one.a && other.b === one.b) {
      taken.add(other)
      out.push({ ...one, label: one.label.replace(/ (left|right) /, ' ') })
    }
    else {
      out.push(one)
    }
  }
  return out
}

/** Path of the same setting on the other side of the car; the path itself where there is none. */
export function otherSide(path: string): string {
  return path.replace(/^(corners\.[fr])([lr])\./, (_, axle: string, side: string) => `${axle}${side === 'l' ? 'r' : 'l'}.`)
}

/** How many settings are filled in and the same in both sheets. */
export function countSameSettings(a: Sheet, b: Sheet): number {
  return SETUP_FIELDS.filter((field) => {
    const value = settingOf(a, field)
    return value !== null && value === settingOf(b, field)
  }).length
}

/** How many settings of a sheet are filled in. */
export function countSettings(sheet: Sheet): number {
  return countSameSettings(sheet, sheet)
}
