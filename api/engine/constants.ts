/** Mean radius of the spherical earth used throughout [m]. */
export const EARTH_RADIUS = 6_371_000;
/** Rotation rate of the earth [rad s⁻¹]. */
export const EARTH_ROTATION = 7.292115e-5;
/** Air density in the gradient-wind formulas [kg m⁻³]. */
export const AIR_DENSITY = 1.15;
/** Von Karman constant [1]. */
export const VON_KARMAN = 0.4;
/** Vmax (1 min) over the 10-min mean at sea [1]. Source: WMO/TD-1555 (Harper, Kepert & Ginger 2010), from memory. */
export const ONE_MINUTE_OVER_TEN = 1.05;
/** Share of the translation speed added to the vortex [1]. Source: Lin & Chavas (2012), from memory. */
export const MOTION_SHARE = 0.55;
/** Rotation of the added motion vector in the cyclonic sense [deg]. Source: Lin & Chavas (2012), from memory. */
export const MOTION_TURN_DEG = 20;
/** Sites farther than this from every leg of the path are out of reach [m]. Product rule. */
export const REACH_LIMIT = 1_000_000;
/** Peak gust below which a site is "below the floor" [m s⁻¹]. Product rule. */
export const GUST_FLOOR = 20;
/** Half span of the central difference that gives the storm's motion [s]. Product rule. */
export const MOTION_HALF_SPAN = 1800;
/** Ambient pressure where none is given [Pa]. Product rule. */
export const STANDARD_AMBIENT_PRESSURE = 101_000;
/** Least pressure deficit used [Pa]. Product rule. */
export const LEAST_PRESSURE_DEFICIT = 100;
/** Least symmetric 10-min wind left after the motion is taken out [m s⁻¹]. Product rule. */
export const LEAST_SYMMETRIC_WIND = 5;
/** Height of every wind of the chain above ground [m]. */
export const REFERENCE_HEIGHT = 10;
/** Largest gust a result may hold [m s⁻¹]. Product rule: beyond it the input is at fault. */
export const GUST_CEILING = 120;
