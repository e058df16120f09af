"""The engines and machines of the Tallow Fen Drainage Board. Board, places, people and engines are invented."""

from fleetcare.demo.boats import BOATS
from fleetcare.demo.plant import PLANT
from fleetcare.demo.pumps import PUMPS
from fleetcare.demo.sets import SETS
from fleetcare.demo.vehicles import VEHICLES

SHOP = "Tallow Fen Drainage Board"

ITEMS = (*PUMPS, *SETS, *VEHICLES, *PLANT, *BOATS)
