"""The map: every calc and every arrow is on it, nothing covers anything, and it can be read and printed."""

import re
from collections import Counter
from dataclasses import replace
from itertools import combinations, pairwise
from xml.etree import ElementTree as ET

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.figures.illustrate import Studio
from calcgen.figures.labels import Box, text_width
from calcgen.figures.map import compose_map, plans_of
from calcgen.figures.map_drawing import BOX, LABEL, MapDrawing, Placed, Plan
from calcgen.figures.map_layered import layered
from calcgen.figures.map_layout import Arrow, backward, layers_of, on_loops
from calcgen.figures.map_sheets import HEIGHT, MOST_ARROWS, WIDTH, MapSheet, sheets_of
from calcgen.figures.map_words import BAR, MOST_SLOTS, Given, cell_of, shortened
from calcgen.figures.picture import DASH, WIDTHS, Shape, Width, label_boxes
from calcgen.figures.svg import COLOURS, render
from tests.figures.graphs import BASIS, CHAIN, GATHERED, LOOP, MAPS, graph, graphs, seeded

widths = pytest.mark.parametrize("width", list(WIDTHS))


def box_of(placed: Placed) -> Box:
    return Box(placed.box_left, placed.top, placed.box_left + BOX, placed.top + placed.height)


def segments(plan: Plan) -> list[tuple[Arrow, np.ndarray, np.ndarray]]:
    """Give all straight parts of routes, with the ends of their arrows."""
    pairs = ((r.ends, np.array(a), np.array(b)) for r in plan.routes for a, b in pairwise(r.points))
    return [(ends, a, b) for ends, a, b in pairs if np.any(a != b)]


def words(sheets: tuple[MapSheet, ...], width: Width) -> str:
    return "\n".join(text for sheet in sheets for text, _ in label_boxes(compose_map(sheet, width)))


@widths
@settings(max_examples=60, deadline=None)
@given(drawing=graphs())
def test_no_label_overlaps_another_or_leaves_the_picture(drawing: MapDrawing, width: Width) -> None:
    for sheet in sheets_of(drawing):
        picture = compose_map(sheet, width)
        boxes = label_boxes(picture)
        for (first, a), (second, b) in combinations(boxes, 2):
            assert not a.overlaps(b), f"{first!r} over {second!r}"
        frame = picture.frame
        for text, box in boxes:
            assert frame.left <= box.left, text
            assert box.right <= frame.right, text
            assert frame.top <= box.top, text
            assert box.bottom <= frame.bottom, text


@widths
@settings(max_examples=60, deadline=None)
@given(drawing=graphs())
def test_words_stand_in_their_box_or_clear_of_all_boxes(drawing: MapDrawing, width: Width) -> None:
    for sheet in sheets_of(drawing):
        plans = plans_of(sheet, width)
        boxes = [box_of(placed) for plan in plans for placed in plan.cells]
        for first, second in combinations(boxes, 2):
            assert not first.overlaps(second, 8.0)
        inside = sum(len(placed.cell.lines) for plan in plans for placed in plan.cells)
        found = 0
        for text, label in label_boxes(compose_map(sheet, width)):
            touched = [box for box in boxes if label.overlaps(box)]
            if touched:
                (box,) = touched
                assert box.left < label.left, text
                assert label.right < box.right, text
                assert box.top < label.top, text
                assert label.bottom < box.bottom, text
                found += 1
        assert found == inside


@widths
@settings(max_examples=60, deadline=None)
@given(drawing=graphs())
def test_no_arrow_crosses_words_or_boxes(drawing: MapDrawing, width: Width) -> None:
    for sheet in sheets_of(drawing):
        labels = label_boxes(compose_map(sheet, width))
        for plan in plans_of(sheet, width):
            boxes = [box_of(placed).grown(-0.5) for placed in plan.cells]
            for ends, a, b in segments(plan):
                line = a[None], b[None]
                assert not any(box.crosses(*line) for box in boxes), ends
                crossed = [text for text, box in labels if box.crosses(*line)]
                assert crossed == [], ends


def assert_apart(plan: Plan) -> None:
    """No two arrows of different calcs run along each other nearer than 3 pixels: each can be followed."""
    for (first, a, b), (second, c, d) in combinations(segments(plan), 2):
        for along in (0, 1):
            across = 1 - along
            if first[0] != second[0] and a[across] == b[across] and c[across] == d[across]:
                end = min(max(a[along], b[along]), max(c[along], d[along]))
                start = max(min(a[along], b[along]), min(c[along], d[along]))
                assert end <= start or abs(a[across] - c[across]) >= 3, (first, second)


@widths
@settings(max_examples=60, deadline=None)
@given(drawing=graphs())
def test_arrows_of_different_calcs_only_cross(drawing: MapDrawing, width: Width) -> None:
    for sheet in sheets_of(drawing):
        for plan in plans_of(sheet, width):
            assert_apart(plan)


@pytest.mark.slow
@pytest.mark.parametrize("seed", range(400))
def test_arrows_only_cross_in_any_number_of_layers(seed: int) -> None:
    drawing = seeded(seed)
    ends = [arrow.ends for arrow in drawing.arrows]
    numbers = sorted({calc for arrow in ends for calc in arrow})
    back = backward(numbers, ends)
    layers = layers_of(numbers, [arrow for arrow in ends if arrow not in back])
    cells = {}
    for calc in drawing.calcs:
        given = [
            Given(a, short=False, loop=False, brief=False) for a in drawing.arrows if a.taker == calc.number
        ]
        if len(given) <= MOST_SLOTS:
            cells[calc.number] = cell_of(calc, given, ())
    drawn = [arrow for arrow in ends if arrow[1] in cells]
    for calc in drawing.calcs:
        cells.setdefault(calc.number, cell_of(calc, (), ()))
    assert_apart(layered(layers, cells, drawn))


@widths
@settings(max_examples=60, deadline=None)
@given(drawing=graphs())
def test_each_arrow_runs_from_its_calc_to_the_one_it_feeds(drawing: MapDrawing, width: Width) -> None:
    for sheet in sheets_of(drawing):
        for plan in plans_of(sheet, width):
            cells = {placed.cell.calc.number: placed for placed in plan.cells}
            drawn = {route.ends for route in plan.routes if route.tip}
            for giver, taker in drawn:
                (last,) = [r.points[-1] for r in plan.routes if r.ends == (giver, taker)]
                enters = cells[taker]
                assert last == (enters.box_left, enters.top + enters.cell.entry(giver))
                # all points of the giver's routes that can be reached against the arrows
                reached, routes = {last}, [r.points for r in plan.routes if r.ends[0] == giver]
                while new := {points[0] for points in routes if touches(points, reached)} - reached:
                    reached |= new
                leaves = cells[giver]
                side = (leaves.box_left, leaves.box_left + BOX)
                starts = [p for p in reached - {last} if p[0] in side]
                assert any(leaves.top < y < leaves.top + leaves.height for _, y in starts), (giver, taker)


def touches(points: tuple[tuple[float, float], ...], others: set[tuple[float, float]]) -> bool:
    """Tell whether one of the others lies on a polyline of level and upright parts."""
    return any(
        min(a[0], b[0]) <= x <= max(a[0], b[0]) and min(a[1], b[1]) <= y <= max(a[1], b[1])
        for a, b in pairwise(points)
        for x, y in others
    )


@settings(max_examples=60, deadline=None)
@given(drawing=graphs())
def test_every_calc_that_feeds_or_is_fed_is_on_one_sheet_with_all_that_feeds_it(drawing: MapDrawing) -> None:
    sheets = sheets_of(drawing)
    cells = [cell for sheet in sheets for piece in sheet.pieces for cell in piece.cells]
    linked = {calc for arrow in drawing.arrows for calc in arrow.ends}
    assert Counter(cell.calc.number for cell in cells) == Counter(linked)
    for cell in cells:
        givers = [a.giver for a in drawing.arrows if a.taker == cell.calc.number]
        named = [slot.giver for slot in cell.slots if slot.giver]
        rest = [slot.lines[0].text for slot in cell.slots if not slot.giver]
        assert set(named) <= set(givers)
        assert rest == ([f"from {len(givers) - len(named)} other calcs"] if len(givers) > len(named) else [])
    drawn = {arrow for sheet in sheets for piece in sheet.pieces for arrow in piece.arrows}
    short = {(s.giver, c.calc.number) for c in cells for s in c.slots if s.short}
    assert not drawn & short
    for giver, taker in {a.ends for a in drawing.arrows} - drawn:
        (cell,) = [c for c in cells if c.calc.number == giver]
        assert any(line.text.startswith("feeds ") for line in cell.lines), (giver, taker)


@settings(max_examples=30, deadline=None)
@given(drawing=graphs(most=30))
def test_a_sheet_fits_on_paper(drawing: MapDrawing) -> None:
    for sheet in sheets_of(drawing):
        frame = compose_map(sheet, "wide").frame
        calcs = sum(len(piece.cells) for piece in sheet.pieces)
        assert frame.right - frame.left <= WIDTH
        assert frame.bottom - frame.top <= HEIGHT + 24 or calcs == 1
        narrow = compose_map(sheet, "narrow").frame
        assert narrow.right - narrow.left <= WIDTHS["narrow"]


@settings(max_examples=40, deadline=None)
@given(drawing=graphs(), width=st.sampled_from(list(WIDTHS)))
def test_values_are_whole_or_not_there(drawing: MapDrawing, width: Width) -> None:
    """A number that lost its end would be another number."""
    for sheet in sheets_of(drawing):
        for text, _ in label_boxes(compose_map(sheet, width)):
            if "…" in text:
                assert not re.search(r"=|\d\s|⁵|kN|IPE", text.removeprefix("loop, from ")), text


def test_calcs_of_a_chain_stand_in_layers_that_fit_side_by_side() -> None:
    (sheet,) = sheets_of(CHAIN)
    assert [len(piece.layers) for piece in sheet.pieces] == [3, 3, 3, 1]
    for piece in sheet.pieces:
        assert all(len(layer) == 1 for layer in piece.layers)
        left = [placed.left for placed in piece.plan.cells]
        assert left == sorted(left)


@widths
def test_a_loop_is_seen_as_one(width: Width) -> None:
    (sheet,) = sheets_of(LOOP)
    names = [calc.number for calc in LOOP.calcs]
    loop = {(names[0], names[1]), (names[1], names[2]), (names[2], names[0]), (names[4], names[4])}
    assert on_loops(arrow.ends for arrow in LOOP.arrows) == loop
    routes = [route for plan in plans_of(sheet, width) for route in plan.routes if route.tip]
    assert {route.ends for route in routes if route.loop} == loop
    assert words((sheet,), width).count("loop, from ") == len(loop)


def test_a_loop_that_fits_a_sheet_is_drawn_whole_where_its_surroundings_are_cut() -> None:
    ring = [(1, 2), (2, 3), (3, 1)]
    drawing = graph([(0, 1), *ring, (0, 4), (4, 5), (1, 6), (3, 7), (0, 7), (7, 8), (5, 8)], 9)
    names = [calc.number for calc in drawing.calcs]
    whole = {(names[giver], names[taker]) for giver, taker in ring}
    pieces = [piece for sheet in sheets_of(drawing) for piece in sheet.pieces]
    assert len(pieces) > 1
    (piece,) = [piece for piece in pieces if whole & set(piece.arrows)]
    assert set(piece.arrows) == whole
    assert {route.ends for route in piece.plan.routes if route.loop and route.tip} == whole


def test_a_calc_that_feeds_many_has_short_arrows_that_name_it() -> None:
    sheets = sheets_of(BASIS)
    basis = "W-00"
    arrows = [arrow for sheet in sheets for piece in sheet.pieces for arrow in piece.arrows]
    fed = [arrow.taker for arrow in BASIS.arrows if arrow.giver == basis]
    assert len(fed) > MOST_ARROWS
    assert all(giver != basis for giver, _ in arrows)
    assert words(sheets, "wide").count(f"from {basis}") == len(fed)


def test_many_arrows_into_one_box_are_told_as_one() -> None:
    (sheet,) = sheets_of(GATHERED)
    assert "from 11 other calcs" in words((sheet,), "wide")
    cell = next(
        c for piece in sheet.pieces for c in piece.cells if c.calc.number == GATHERED.calcs[20].number
    )
    assert len(cell.slots) == MOST_SLOTS


def test_an_arrow_carries_its_first_values_and_the_number_of_others_and_changed_ones_before() -> None:
    drawing = graph([(0, 5)], 6, values=6)
    (sheet,) = sheets_of(drawing)
    told = words((sheet,), "wide").splitlines()
    assert told[told.index("q_k = 5.000 kPa") + 1] == "was 4.000 kPa at P1"
    assert "+ 3 more" in told
    assert "M_Ed = 33.93 kN·m" not in told  # three others have changed


def test_no_arrows_no_map() -> None:
    assert sheets_of(graph([], 1)) == ()
    assert sheets_of(graph([], 7)) == ()


@widths
def test_a_box_tells_by_its_outline_how_the_calc_stands(width: Width) -> None:
    drawing = graph([(n, n + 1) for n in range(4)], 5, kind=1)
    shapes: dict[str, set[str]] = {}
    standing = {calc.href: calc.standing for calc in drawing.calcs}
    for sheet in sheets_of(drawing):
        for item in compose_map(sheet, width).items:
            if isinstance(item, Shape) and item.href in standing:
                told = shapes.setdefault(standing[item.href], set())
                told |= {"corners cut"} if len(item.rings[0]) == 8 else set()
                told |= {"dashes"} if item.stroke is not None and item.stroke.dash == DASH else set()
                told |= {"bar"} if item.box.right - item.box.left == BAR else set()
    assert shapes == {
        "satisfied": set(),
        "exceeded": {"bar"},
        "no checks": set(),
        "not evaluated": {"dashes"},
        "in error": {"bar", "corners cut"},
    }


@widths
@pytest.mark.parametrize("name", MAPS)
def test_boxes_lead_to_calcs_and_words_on_arrows_to_all_values(name: str, width: Width) -> None:
    for sheet in sheets_of(MAPS[name]):
        text = render(compose_map(sheet, width))
        root = ET.fromstring(text)  # noqa: S314  our own
        assert root.get("role") == "group"  # the links of an image would not be there for all
        links = root.iter("{http://www.w3.org/2000/svg}a")
        led = {link.get("href"): ["".join(t.itertext()) for t in link] for link in links}
        cells = [cell for piece in sheet.pieces for cell in piece.cells]
        for cell in cells:
            assert next(t for t in led[cell.calc.href] if t) == cell.lines[0].text
            for slot in cell.slots:
                assert slot.lines[0].text in led[slot.href]
        assert set(re.findall(r"#[0-9a-f]{6}", text)) <= set(COLOURS.values())


@widths
@pytest.mark.parametrize("name", MAPS)
def test_the_same_map_gives_the_same_bytes(name: str, width: Width) -> None:
    def drawn() -> list[str]:
        return [render(compose_map(sheet, width)) for sheet in sheets_of(MAPS[name])]

    assert drawn() == drawn()


def test_ids_are_unique_over_all_sheets() -> None:
    sheets = sheets_of(graph([(n, n + 1) for n in range(40)], 41, values=6))
    assert len(sheets) > 1
    texts = [render(compose_map(sheet, width)) for sheet in sheets for width in WIDTHS]
    ids = [found for text in texts for found in re.findall(r' id="([^"]*)"', text)]
    assert len(ids) == len(set(ids))


def test_what_did_not_change_is_not_drawn_again() -> None:
    studio, pairs = Studio(), [(n, n + 1) for n in range(40)]
    before = studio.draw_map(graph(pairs, 41, values=6))
    again = studio.draw_map(graph(pairs, 41, values=6))
    assert all(a is b for a, b in zip(before, again, strict=True))
    drawing = graph(pairs, 41, values=6)
    exceeded = replace(drawing.calcs[0], standing="exceeded")
    after = studio.draw_map(replace(drawing, calcs=(exceeded, *drawing.calcs[1:])))
    assert [a is b for a, b in zip(before, after, strict=True)] == [False] + [True] * (len(before) - 1)


@given(st.text(max_size=60), st.floats(20, 200))
def test_shortened_text_fits_and_says_that_something_is_left_out(text: str, width: float) -> None:
    short = shortened(text, 10, width)
    assert short == text or (short.endswith("…") and text.startswith(short[:-1]))
    assert text_width(short, 10) <= width


@widths
@pytest.mark.slow
def test_a_large_project_is_cut_into_sheets(width: Width) -> None:
    pairs = [(n, n + step) for n in range(280) for step in (1, 3, 7)]
    sheets = sheets_of(graph(pairs, 300, values=4, kind=1))
    assert sum(len(piece.cells) for sheet in sheets for piece in sheet.pieces) == 287
    for sheet in sheets:
        frame = compose_map(sheet, width).frame
        assert frame.right - frame.left <= (WIDTH if width == "wide" else WIDTHS["narrow"])


def test_words_leave_room_for_the_head_of_the_arrow() -> None:
    for sheet in sheets_of(graph([(0, 1), (1, 2)], 3, values=6, kind=1)):
        for plan in plans_of(sheet, "wide"):
            assert all(placed.label <= LABEL for placed in plan.cells)
