"""Figures of flow along walls and of torsion: arrows run as the flow does, and turn as the torque does."""

from dataclasses import replace

import numpy as np
import pytest

from calcgen.figures.flow import DIAGRAM, FlowDrawing, compose_flow
from calcgen.figures.picture import WIDTHS, Picture, Shape, Width, label_boxes
from calcgen.figures.torsion import compose_torsion
from tests.figures.shear_models import BAR_TORSION, BOX_TORSION, CHANNEL, NO_FLOW, OPEN_TORSION, ROUND_TORSION

places = pytest.mark.parametrize("width", list(WIDTHS))
Arrow = tuple[np.ndarray, np.ndarray]


def arrows(picture: Picture, weight: float) -> list[Arrow]:
    """Straight arrows of one weight: tail, and way to the point of the head."""
    found = []
    for shafts, heads in zip(picture.items, picture.items[1:], strict=False):
        if not (isinstance(shafts, Shape) and isinstance(heads, Shape) and heads.fill == "ink"):
            continue
        if shafts.stroke and shafts.stroke.weight == weight and not shafts.closed:
            for shaft, head in zip(shafts.rings, heads.rings, strict=True):
                found.append((np.array(shaft[0]), np.array(head[0]) - np.array(shaft[0])))
    return found


def around(pairs: list[Arrow], centre: np.ndarray) -> float:
    """Sum of the turning about a centre, positive clockwise as seen (pixels run down)."""
    arms = ((tail - centre, way) for tail, way in pairs)
    return sum(float(arm[0] * way[1] - arm[1] * way[0]) for arm, way in arms)


def reversed_walls(drawing: FlowDrawing) -> FlowDrawing:
    return replace(drawing, walls=tuple(replace(w, flow=-w.flow) for w in drawing.walls))


@places
def test_flow_runs_from_the_first_point_of_a_wall_to_its_last_where_it_is_positive(width: Width) -> None:
    top, web, bottom = (
        [way for _, way in arrows(compose_flow(replace(CHANNEL, walls=(wall,)), width), 1.2)]
        for wall in CHANNEL.walls
    )
    assert all(x < 0 and abs(y) < 1e-9 for x, y in top)
    assert all(y > 0 and abs(x) < 1e-9 for x, y in web)  # down, as V acts
    assert all(x > 0 and abs(y) < 1e-9 for x, y in bottom)


@places
def test_negative_flow_runs_back_and_its_diagram_is_the_same(width: Width) -> None:
    there, back = compose_flow(CHANNEL, width), compose_flow(reversed_walls(CHANNEL), width)
    ways = [way for _, way in arrows(there, 1.2)]
    others = [way for _, way in arrows(back, 1.2)]
    assert np.allclose(ways, -np.array(others))
    diagrams = [[i.rings for i in p.items if isinstance(i, Shape) and i.opacity < 1] for p in (there, back)]
    assert diagrams[0] == diagrams[1]


@places
def test_the_diagrams_are_to_one_scale(width: Width) -> None:
    picture = compose_flow(CHANNEL, width)
    diagrams = [i for i in picture.items if isinstance(i, Shape) and i.opacity < 1]
    largest = max(float(np.abs(wall.flow).max()) for wall in CHANNEL.walls)
    for wall, diagram in zip(CHANNEL.walls, diagrams, strict=True):
        ring = np.array(diagram.rings[0])
        face, edge = ring[: len(wall.flow)], ring[len(wall.flow) :][::-1]
        assert np.allclose(np.hypot(*(edge - face).T), DIAGRAM * np.abs(wall.flow) / largest)


@places
@pytest.mark.parametrize("sense", [1, -1])
def test_the_torque_turns_the_way_of_its_flow(sense: int, width: Width) -> None:
    torque = replace(BOX_TORSION.torque, value=10.2 * sense) if BOX_TORSION.torque else None
    drawing = replace(BOX_TORSION, torque=torque)
    picture = compose_flow(drawing if sense > 0 else reversed_walls(drawing), width)
    walls = [i for i in picture.items if isinstance(i, Shape) and i.fill == "section"]
    centre = np.array(
        [(walls[0].box.left + walls[0].box.right) / 2, (walls[0].box.top + walls[0].box.bottom) / 2]
    )
    (curl,) = [
        np.array(i.rings[0])
        for i in picture.items
        if isinstance(i, Shape) and not i.closed and i.stroke and i.stroke.weight == 1.6
    ]
    turning = around([(curl[0], curl[1] - curl[0])], centre)
    assert np.sign(turning) == np.sign(around(arrows(picture, 1.2), centre)) == sense


@places
def test_an_open_wall_in_torsion_has_arrows_both_ways(width: Width) -> None:
    ways = np.array([way for _, way in arrows(compose_flow(OPEN_TORSION, width), 1.2)])
    assert len(ways)
    assert np.allclose(ways.sum(axis=0), 0.0)


@places
def test_without_flow_there_are_no_arrows_and_the_force_is_told(width: Width) -> None:
    picture = compose_flow(NO_FLOW, width)
    assert arrows(picture, 1.2) == []
    assert "V = 0 kN" in {text for text, _ in label_boxes(picture)}


@places
@pytest.mark.parametrize("drawing", [BAR_TORSION, ROUND_TORSION], ids=lambda d: d.ident)
def test_the_largest_stresses_turn_with_the_torque(drawing: object, width: Width) -> None:
    assert drawing in (BAR_TORSION, ROUND_TORSION)
    torsion = BAR_TORSION if drawing is BAR_TORSION else ROUND_TORSION
    picture = compose_torsion(torsion, width)
    section = next(i for i in picture.items if isinstance(i, Shape) and i.fill == "section").box
    centre = np.array([(section.left + section.right) / 2, (section.top + section.bottom) / 2])
    assert torsion.torque
    assert np.sign(around(arrows(picture, 2.0), centre)) == np.sign(torsion.torque.value)
