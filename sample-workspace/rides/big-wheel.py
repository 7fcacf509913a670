"""Cabins of the big wheel: how one swings while the wheel turns it around."""
from dataclasses import dataclass

import numpy as np


@dataclass
class Cabin:
    mass: float = 310.0  # kg, with guests
    drop: float = 1.35  # m, hinge to centre of mass
    inertia: float = 240.0  # kg m^2, about the centre of mass
    friction: float = 85.0  # N m s


class BigWheel:
    """The wheel is driven; its turn ph is prescribed.

    @visviva big-wheel
    coordinates  s [rad]                     s from straight down, counter-clockwise
    parameters   m [kg] > 0, d [m] > 0, J [kg m^2] > 0, c [N m s] >= 0, R [m] > 0, g [m/s^2] > 0
    inputs       ph [rad]                    turn of the wheel, from the lowest point
    where H = (R*sin(ph), -R*cos(ph))
    body cabin: mass m, inertia J, centre (H.x + d*sin(s), H.y - d*cos(s)), angle s
    gravity (0, -g)
    D = 1/2*c*(s' - ph')^2
    """

    def __init__(self, radius=28.0, cabin=Cabin()):
        self.radius = radius
        self.cabin = cabin
        self.g = 9.81

    def swing(self, y, turn, rate, acceleration):
        """Rates of [s, s'].

        @visviva big-wheel
        reads  y = [s, s'], turn = ph, rate = ph', acceleration = ph''
        reads  self.radius = R, self.cabin.mass = m, self.cabin.drop = d
        reads  self.cabin.inertia = J, self.cabin.friction = c
        checks return = [s', s'']
        """
        s, w = y
        cabin = self.cabin
        lean = s - turn
        hinge = self.radius * (acceleration * np.cos(lean) + rate**2 * np.sin(lean))
        moment = -cabin.mass * cabin.drop * (self.g * np.sin(s) + hinge)
        moment -= cabin.friction * (w - rate)
        return np.array([w, moment / (cabin.inertia + cabin.mass * cabin.drop**2)])
