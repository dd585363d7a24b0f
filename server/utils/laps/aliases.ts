/**
 * The names under which columns of ordinary logs mean a channel, as lower-case words. The words are the plain ones of
 * the trade, with the abbreviations that people use for them.
 */
export const ALIASES: Readonly<Record<string, readonly string[]>> = {
  time: [
    'time', 't', 'elapsed', 'elapsed time', 'timestamp', 'time stamp', 'ts', 'seconds', 'secs', 'sec', 's', 'milliseconds',
    'millis', 'ms', 'session time', 'log time', 'logging time', 'run time', 'running time', 'total time', 'relative time',
    'utc', 'utc time', 'time utc', 'date time', 'datetime', 'utc datetime', 'date', 'clock', 'time of day', 'local time',
    'iso time', 'unix time', 'epoch', 'epoch time', 'zeit', 'temps', 'tiempo',
  ],
  latitude: ['latitude', 'lat', 'position latitude', 'position lat', 'pos lat', 'lat pos', 'latitude position', 'lat wgs 84', 'latitude wgs 84', 'breite', 'breitengrad', 'latitud'],
  longitude: ['longitude', 'lon', 'long', 'lng', 'position longitude', 'position lon', 'position long', 'pos lon', 'pos long', 'lon pos', 'long pos', 'longitude position', 'lon wgs 84', 'longitude wgs 84', 'lange', 'langengrad', 'longitud'],
  altitude: ['altitude', 'alt', 'elevation', 'elev', 'ele', 'height', 'height msl', 'altitude msl', 'hohe'],
  speed: ['speed', 'velocity', 'vel', 'spd', 'ground speed', 'groundspeed', 'speed over ground', 'sog', 'speed 2d', 'speed 3d', 'geschwindigkeit', 'vitesse', 'velocidad'],
  course: ['course', 'heading', 'bearing', 'track', 'track angle', 'course over ground', 'cog', 'hdg', 'head', 'true course', 'true heading', 'heading of motion', 'direction', 'kurs'],
  longitudinal_acceleration: [
    'longitudinal acceleration', 'longitudinal acc', 'longitudinal accel', 'long acceleration', 'long acc', 'long accel', 'lon acc', 'lon accel',
    'acceleration longitudinal', 'acc longitudinal', 'acc long', 'accel long', 'longitudinal g', 'long g', 'lon g', 'g long', 'inline acc', 'inline g',
    'acceleration x', 'accel x', 'acc x', 'accelerometer x', 'x acceleration', 'x accel', 'x acc', 'a x', 'ax', 'g x', 'gx', 'g force x', 'x g',
  ],
  lateral_acceleration: [
    'lateral acceleration', 'lateral acc', 'lateral accel', 'lat acceleration', 'lat acc', 'lat accel',
    'acceleration lateral', 'acc lateral', 'acc lat', 'accel lat', 'lateral g', 'lat g', 'g lat',
    'acceleration y', 'accel y', 'acc y', 'accelerometer y', 'y acceleration', 'y accel', 'y acc', 'a y', 'ay', 'g y', 'gy', 'g force y', 'y g',
  ],
  vertical_acceleration: [
    'vertical acceleration', 'vertical acc', 'vertical accel', 'vert acc', 'vert accel', 'acceleration vertical', 'acc vertical', 'acc vert',
    'vertical g', 'vert g', 'g vert', 'acceleration z', 'accel z', 'acc z', 'accelerometer z', 'z acceleration', 'z accel', 'z acc', 'a z', 'az', 'g z', 'g force z', 'z g',
  ],
  yaw_rate: ['yaw rate', 'yawrate', 'yaw', 'yaw velocity', 'gyro z', 'gyroscope z', 'z gyro', 'gyro yaw', 'rotation rate z', 'rate z', 'z rate', 'angular rate z', 'omega z', 'turn rate'],
  rpm: ['rpm', 'engine speed', 'engine rpm', 'rpm engine', 'revs', 'engine revs', 'crank speed', 'crankshaft speed', 'motor rpm', 'drehzahl'],
  throttle: ['throttle', 'throttle position', 'throttle pos', 'tps', 'throttle pedal', 'throttle angle', 'accelerator', 'accelerator pedal', 'accelerator position', 'accelerator pedal position', 'pedal position', 'gas', 'gas pedal'],
  brake: ['brake', 'brakes', 'brake pedal', 'brake position', 'brake pos', 'brake pedal position', 'brake switch', 'braking'],
  brake_pressure: ['brake pressure', 'brake press', 'brake pres', 'brake line pressure', 'brake pressure front', 'front brake pressure'],
  steering: ['steering', 'steering angle', 'steer', 'steer angle', 'steering wheel', 'steering wheel angle', 'steering position', 'lenkwinkel'],
  gear: ['gear', 'current gear', 'gear position', 'selected gear', 'gear number', 'engaged gear', 'gang'],
  oil_pressure: ['oil pressure', 'oil press', 'oil pres', 'oil p', 'engine oil pressure', 'pressure oil'],
  oil_temperature: ['oil temperature', 'oil temp', 'oil t', 'engine oil temperature', 'engine oil temp', 'temp oil'],
  coolant_temperature: [
    'coolant temperature', 'coolant temp', 'coolant', 'water temperature', 'water temp', 'engine coolant temperature', 'engine coolant temp', 'engine temperature', 'engine temp',
    'temp coolant', 'temp water', 'clt', 'ect',
  ],
  battery_voltage: ['battery voltage', 'battery', 'voltage', 'batt', 'batt voltage', 'battery volts', 'volts', 'vbat', 'vbatt', 'supply voltage', 'system voltage'],
  satellites: ['satellites', 'sats', 'satellites used', 'satellites in use', 'number of satellites', 'num satellites', 'satellite count', 'satellites count', 'num sats', 'sat count', 'nsat', 'nsats', 'num sat'],
  fix_quality: ['fix quality', 'fix', 'fix type', 'quality', 'position fix', 'position quality', 'fix status'],
}

/** Names that mean a channel only together with a unit that fits it: `lat (g)` is no latitude. */
export const ALIASES_WITH_UNIT: Readonly<Record<string, readonly string[]>> = {
  time: ['uhr'],
  speed: ['v'],
  longitudinal_acceleration: ['longitudinal', 'long', 'lon', 'inline'],
  lateral_acceleration: ['lateral', 'lat'],
  vertical_acceleration: ['vertical', 'vert'],
  brake_pressure: ['brake', 'brakes', 'front brake', 'brake front'],
  oil_pressure: ['oil'],
  oil_temperature: ['oil'],
  coolant_temperature: ['water', 'engine'],
}

/** First words that say which device measured, and how much more its column is to be trusted for these channels. */
export const DEVICES: ReadonlyMap<string, number> = new Map([
  ['gps', 1], ['gnss', 1], ['imu', 0], ['logger', 0], ['engine', 0], ['car', 0], ['vehicle', -1], ['ecu', -1], ['obd', -1], ['obd2', -1], ['can', -1],
])
