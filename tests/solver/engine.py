"""The same car in an independent general-purpose multibody engine (exudyn, tests only).

Planar rigid bodies, distance constraints for the links, a prismatic joint for the front
wheels' slide, spring-damper connectors in C++ for springs, shocks and tyres,
generalised-alpha. Tables, stops and tyres that leave the ground are Python
functions of the connectors, which the engine calls at each iteration.
"""

import math

import numpy as np

try:
    import exudyn as exu
    import exudyn.itemInterface as item
except ImportError as error:  # Stop with the reason: a check that is skipped checks nothing.
    raise RuntimeError(
        "the cross-check needs exudyn (tests/requirements.txt), which is not installed for this "
        "Python: install it or run the tests on a version it is published for"
    ) from error

from tests.solver.multipliers import Model, hit_at, law, stop_push

G = 9.80665
OUT = exu.OutputVariableType


class Engine:
    """One car file assembled in the engine; only four-links."""

    def __init__(self, data, lift_off=False):
        self.data, self.model, self.lift_off = data, Model(data), lift_off
        self.system = exu.SystemContainer()
        self.mbs = self.system.AddSystem()
        self._bodies()
        self._links()
        self._rear_springs()
        self._front_slide()
        self._tyres()
        self._hit()
        self.mbs.Assemble()

    def _bodies(self):
        mbs, model = self.mbs, self.model
        add = mbs.AddObject
        self.nodes = {}
        for name, place, mass, inertia in (
            ("chassis", model.cg, model.ms, self.data["chassis"]["pitch_inertia"]),
            ("housing", model.axle, model.mr, self.data["rear"]["housing_inertia"]),
        ):
            self.nodes[name] = mbs.AddNode(item.NodeRigidBody2D(referenceCoordinates=[*place, 0.0]))
            body = add(item.ObjectRigidBody2D(mass=mass, inertia=inertia, nodeNumber=self.nodes[name]))
            setattr(self, name, body)
            self._weight(body, mass)
        # The joint wants a body that can turn: the wheels get an inertia too small to feel.
        self.nodes["wheel"] = mbs.AddNode(item.NodeRigidBody2D(referenceCoordinates=[*model.wheel, 0.0]))
        self.wheel = add(item.ObjectRigidBody2D(mass=model.mf, inertia=1e-5, nodeNumber=self.nodes["wheel"]))
        self._weight(self.wheel, model.mf)
        self.ground = add(item.ObjectGround())

    def _weight(self, body, mass):
        marker = self.mbs.AddMarker(item.MarkerBodyMass(bodyNumber=body))
        self.mbs.AddLoad(item.LoadMassProportional(markerNumber=marker, loadVector=[0.0, -G, 0.0]))

    def _marker(self, body, place):
        """A marker at a place of a body given at ride height."""
        origin = self.model.cg if body == self.chassis else self.model.axle
        local = [place[0] - origin[0], place[1] - origin[1], 0.0]
        return self.mbs.AddMarker(item.MarkerBodyPosition(bodyNumber=body, localPosition=local))

    def _links(self):
        self.links = []
        for name in ("lower", "upper"):
            link = self.data["rear"]["linkage"][name]
            ends = [self._marker(self.chassis, link["chassis"]), self._marker(self.housing, link["housing"])]
            length = math.dist(link["chassis"], link["housing"])
            self.links.append(self.mbs.AddObject(item.ObjectConnectorDistance(markerNumbers=ends, distance=length)))

    def _rear_springs(self):
        self.lines = []
        for rest, entry in zip(self.model.rest, self.data["rear"]["springs"], strict=True):
            spring, damper = entry.get("spring"), entry.get("damper")
            ends = [self._marker(self.chassis, entry["chassis"]), self._marker(self.housing, entry["housing"])]
            length = math.dist(entry["chassis"], entry["housing"])
            plain = all(part is None or "rate" in part for part in (spring, damper))
            connector = item.ObjectConnectorSpringDamper(
                markerNumbers=ends,
                referenceLength=length,
                stiffness=spring["rate"] if plain and spring else 0.0,
                damping=damper["rate"] if plain and damper else 0.0,
                force=-rest,
            )
            if not plain:

                def force(mbs, t, n, stretch, speed, *_, spring=spring, damper=damper, rest=rest):
                    return -(rest + law(spring, -stretch) - law(spring, 0.0) + law(damper, -speed))

                connector.springForceUserFunction = force
            self.lines.append((self.mbs.AddObject(connector), ends, length))
        self._rear_stops(*self.lines[0][1:])

    def _rear_stops(self, ends, length):
        stops = self._stops("rear")
        if stops:

            def force(mbs, t, n, stretch, speed, *_):
                return -sum(s * stop_push(stop, -s * stretch, -s * speed) for s, stop in stops)

            self.mbs.AddObject(
                item.ObjectConnectorSpringDamper(markerNumbers=ends, referenceLength=length, springForceUserFunction=force)
            )

    def _stops(self, end):
        both = ((1.0, self.data[end].get("bump_stop")), (-1.0, self.data[end].get("droop_stop")))
        return [(sign, stop) for sign, stop in both if stop]

    def _front_slide(self):
        """The slide along chassis z: a prismatic joint, and the spring along it as a long line.

        The line runs from the wheel to a chassis point 1 km up the slide: its direction
        is the slide's to a microradian, and its change of length the travel.
        """
        front, far = self.data["front"], 1000.0
        x, z = self.model.wheel
        slide = item.ObjectJointPrismatic2D(
            markerNumbers=[
                self.mbs.AddMarker(
                    item.MarkerBodyRigid(
                        bodyNumber=self.chassis,
                        localPosition=[x - self.model.cg[0], z - self.model.cg[1], 0.0],
                    )
                ),
                self.mbs.AddMarker(item.MarkerBodyRigid(bodyNumber=self.wheel)),
            ],
            axisMarker0=[0.0, 1.0, 0.0],
            normalMarker1=[1.0, 0.0, 0.0],
            constrainRotation=True,
        )
        self.slide = self.mbs.AddObject(slide)
        rest = self.model.front_load - self.model.mf * G
        spring, damper, stops = front["spring"], front.get("damper"), self._stops("front")
        plain = "rate" in spring and (damper is None or "rate" in damper) and not stops
        connector = item.ObjectConnectorSpringDamper(
            markerNumbers=[
                self._marker(self.chassis, (x, z + far)),
                self.mbs.AddMarker(item.MarkerBodyPosition(bodyNumber=self.wheel)),
            ],
            referenceLength=far,
            stiffness=spring["rate"] if plain else 0.0,
            damping=damper["rate"] if plain and damper else 0.0,
            force=-rest,
        )
        if not plain:

            def force(mbs, t, n, stretch, speed, *_):
                push = rest + law(spring, -stretch) - law(spring, 0.0) + law(damper, -speed)
                return -push - sum(s * stop_push(stop, -s * stretch, -s * speed) for s, stop in stops)

            connector.springForceUserFunction = force
        self.front_line = self.mbs.AddObject(connector)

    def _tyres(self):
        self.tyres = {}
        fixed = self.mbs.AddNode(item.NodePointGround())
        zero = self.mbs.AddMarker(item.MarkerNodeCoordinate(nodeNumber=fixed, coordinate=0))
        for end, node, static in (("rear", "housing", self.model.rear_load), ("front", "wheel", self.model.front_load)):
            tyre = self.data[end]["tyre"]
            height = self.mbs.AddMarker(item.MarkerNodeCoordinate(nodeNumber=self.nodes[node], coordinate=1))
            # The coordinate is counted from rest; unloaded it stands higher by the static squash.
            connector = item.ObjectConnectorCoordinateSpringDamper(
                markerNumbers=[zero, height],
                stiffness=tyre["rate"],
                damping=tyre["damping"],
                offset=static / tyre["rate"],
            )
            if self.lift_off:

                def force(mbs, t, n, rise, speed, k, c, offset):
                    return min(0.0, k * (rise - offset) + c * speed)

                connector.springForceUserFunction = force
            self.tyres[end] = self.mbs.AddObject(connector)

    def _hit(self):
        """The force at the patch: through the axle centre, and its moment as the axle stands."""
        table = self.data["hit"]["table"]
        push = self.mbs.AddMarker(item.MarkerNodeCoordinate(nodeNumber=self.nodes["housing"], coordinate=0))
        turn = self.mbs.AddMarker(item.MarkerNodeCoordinate(nodeNumber=self.nodes["housing"], coordinate=2))
        radius, node = self.model.axle[1], self.nodes["housing"]

        def moment(mbs, t, load):
            rise = mbs.GetNodeOutput(node, OUT.Coordinates)[1]
            return hit_at(table, t) * (radius + rise)

        self.mbs.AddLoad(item.LoadCoordinate(markerNumber=push, loadUserFunction=lambda mbs, t, load: hit_at(table, t)))
        self.mbs.AddLoad(item.LoadCoordinate(markerNumber=turn, loadUserFunction=moment))

    def run(self, duration, step, report):
        """Channels every `report` seconds, by the names of the car file's histories."""
        settings = exu.SimulationSettings()
        integration = settings.timeIntegration
        integration.endTime = duration
        integration.numberOfSteps = round(duration / step)
        integration.generalizedAlpha.spectralRadius = 0.9
        integration.newton.useModifiedNewton = True
        integration.verboseMode = 0
        settings.displayStatistics = False
        settings.solutionSettings.writeSolutionToFile = False
        settings.solutionSettings.sensorsWritePeriod = report
        sensors = self._sensors()
        self.mbs.Assemble()
        self.mbs.SolveDynamic(settings, exu.DynamicSolverType.GeneralizedAlpha)
        stored = {name: self.mbs.GetSensorStoredData(number) for name, number in sensors.items()}
        return self._channels(stored)

    def _sensors(self):
        def node(name, kind):
            return self.mbs.AddSensor(
                item.SensorNode(nodeNumber=self.nodes[name], storeInternal=True, writeToFile=False, outputVariableType=kind)
            )

        def force(number, kind=OUT.Force):
            return self.mbs.AddSensor(
                item.SensorObject(objectNumber=number, storeInternal=True, writeToFile=False, outputVariableType=kind)
            )

        sensors = {
            "chassis": node("chassis", OUT.Coordinates),
            "housing": node("housing", OUT.Coordinates),
            "rear_tyre": force(self.tyres["rear"]),
            "front_tyre": force(self.tyres["front"]),
            "lower": force(self.links[0]),
            "upper": force(self.links[1]),
            "front": force(self.front_line, OUT.Distance),
        }
        for i, (number, *_) in enumerate(self.lines):
            sensors[f"line{i}"] = force(number, OUT.ForceLocal)
        return sensors

    def _channels(self, stored):
        chassis, housing = stored["chassis"], stored["housing"]
        return {
            "t": chassis[:, 0],
            "cg_x": chassis[:, 1],
            "cg_z": chassis[:, 2],
            "pitch": chassis[:, 3],
            "housing_angle": housing[:, 3],
            "rear_load": -stored["rear_tyre"][:, 1],
            "front_load": -stored["front_tyre"][:, 1],
            "front_travel": 1000.0 - stored["front"][:, 1],
            "rear_spring_force": -sum(stored[f"line{i}"][:, 1] for i in range(len(self.lines))),
            "lower_link_force": np.abs(stored["lower"][:, 1:]).max(axis=1),
            "upper_link_force": np.abs(stored["upper"][:, 1:]).max(axis=1),
        }
