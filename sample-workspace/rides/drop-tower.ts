import { brakeForce } from '../vendor/brake-table';

/** Gondola of the drop tower. Below the brake line, fins enter the magnets; the maker's table gives the force. */
export interface Gondola {
  readonly m: number;
  z: number;
  zDot: number;
}

const BRAKE_LINE = 12;

/**
 * @visviva drop-tower
 * coordinates  z [m]                           height above ground
 * parameters   m [kg] > 0, g [m/s^2] > 0
 * inputs       B [N]                           of the magnets, upward
 * point gondola: mass m at (0, 0, z)
 * gravity (0, 0, -g)
 * force (0, 0, B) at (0, 0, z)
 * checks zDotDot = z''
 */
export function fall(car: Gondola, g: number, dt: number): void {
  const brake = car.z < BRAKE_LINE ? brakeForce(car.zDot) : 0;
  const zDotDot = brake / car.m - g;
  car.zDot += zDotDot * dt;
  car.z += car.zDot * dt;
}
