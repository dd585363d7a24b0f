/**
 * What each setting of a sheet is, how it is measured, and its sign, by the last part of its path. Measuring habits are
 * common practice, no source; what matters is that a team keeps to one.
 */
export const SETUP_HELP: readonly { keys: readonly string[], term: string, words: string }[] = [
  { keys: ['coldKpa'], term: 'Cold', words: 'Tyre pressure above ambient before going out, before sun or driving has warmed it.' },
  { keys: ['targetHotKpa'], term: 'Hot, target', words: 'What it should be on return. What it was is written on the outing.' },
  { keys: ['camberDeg'], term: 'Camber', words: 'Lean of the wheel seen from ahead, car level on its wheels. Leaning in is negative.' },
  { keys: ['casterDeg'], term: 'Caster', words: 'Tilt of the steering axis seen from the side. Its top to the rear is positive.' },
  { keys: ['toeMm'], term: 'Toe', words: 'Each wheel by itself, across the rim. Fronts of the wheels together is positive, apart negative.' },
  { keys: ['springNpmm'], term: 'Spring', words: 'Rate of the spring itself, as printed on it, not at the wheel.' },
  { keys: ['bumpClicks', 'reboundClicks'], term: 'Bump, rebound', words: 'Clicks of the damper’s adjusters, counted from the end that the sheet names.' },
  { keys: ['rideHeightMm'], term: 'Ride height', words: 'Floor to one marked point beside the wheel, always the same one.' },
  { keys: ['barMm'], term: 'Bar', words: 'Diameter of the anti-roll bar.' },
  { keys: ['brakeBiasPct'], term: 'Brake bias', words: 'Share of the brake pressure at the front axle.' },
  { keys: ['frontPads', 'rearPads'], term: 'Pads', words: 'The compound, in your own words.' },
  { keys: ['splitterMm'], term: 'Splitter', words: 'How far it stands out before the bumper; further back is negative.' },
  { keys: ['wingDeg'], term: 'Rear wing', words: 'Angle to the ground. Leading edge down is positive.' },
  { keys: ['ballastKg'], term: 'Ballast', words: 'Weight that was put in, without driver and fuel.' },
]

/** Identifier of the element that shows the help of a setting, by the path of its field; undefined without help. */
export function setupHelpId(path: string): string | undefined {
  const key = path.split('.').at(-1) ?? ''
  const index = SETUP_HELP.findIndex(help => help.keys.includes(key))
  return index < 0 ? undefined : `setup-help-${index}`
}
