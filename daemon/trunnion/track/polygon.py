"""Convex polygons in the plane of a joint's angle and rate: what a reachable set is made of.

Corners run counter-clockwise. A polygon without corners is the empty set.
"""

Point = tuple[float, float]
Polygon = list[Point]

TINY = 1e-9
"""Corners closer than this are one; a point this far outside still counts as inside."""


def rectangle(low_x: float, high_x: float, low_y: float, high_y: float) -> Polygon:
    """The box between these bounds; empty if they are the wrong way round."""
    if low_x > high_x or low_y > high_y:
        return []
    return [(low_x, low_y), (high_x, low_y), (high_x, high_y), (low_x, high_y)]


def sheared(polygon: Polygon, share: float) -> Polygon:
    """Each corner moved along x by `share` times its y."""
    return [(x + share * y, y) for x, y in polygon]


def swept(polygon: Polygon, dx: float, dy: float) -> Polygon:
    """Every point of the polygon moved by every part of ±(dx, dy)."""
    if not polygon:
        return []
    aside = [dx * y - dy * x for x, y in polygon]
    first, last = aside.index(min(aside)), aside.index(max(aside))
    count = len(polygon)
    ahead = _from_to(polygon, first, last, count)
    back = _from_to(polygon, last, first, count)
    moved = [(x + dx, y + dy) for x, y in ahead] + [(x - dx, y - dy) for x, y in back]
    return _without_repeats(moved)


def clipped(polygon: Polygon, axis: int, low: float, high: float) -> Polygon:
    """The part of the polygon with its coordinate `axis` between these bounds."""
    values = [corner[axis] for corner in polygon]
    if values and min(values) < low:
        polygon = _cut(polygon, axis, low, 1.0)
    if values and max(values) > high and polygon:
        polygon = _cut(polygon, axis, high, -1.0)
    return polygon


def chord(
    polygon: Polygon, point: Point, dx: float, dy: float, slack: float = TINY
) -> tuple[float, float] | None:
    """From which to which multiple of (dx, dy) the line through `point` is inside; None if never.

    With (0, 0) as direction: whether the point is inside, as an endless chord. What is `slack`
    outside still counts as inside.
    """
    low, high = float("-inf"), float("inf")
    if not polygon:
        return None
    px, py = point
    x0, y0 = polygon[-1]
    for x1, y1 in polygon:
        edge_x, edge_y = x1 - x0, y1 - y0
        length = (edge_x * edge_x + edge_y * edge_y) ** 0.5
        depth = edge_x * (py - y0) - edge_y * (px - x0) + slack * length
        slope = edge_x * dy - edge_y * dx
        if slope > 0.0:
            low = max(low, -depth / slope)
        elif slope < 0.0:
            high = min(high, -depth / slope)
        elif depth < 0.0:
            return None
        x0, y0 = x1, y1
    return (low, high) if low <= high else None


def contains(polygon: Polygon, point: Point) -> bool:
    """Whether the point is inside, edges included."""
    return chord(polygon, point, 0.0, 0.0) is not None


def _from_to(polygon: Polygon, begin: int, end: int, count: int) -> Polygon:
    if end < begin:
        end += count
    return [polygon[index % count] for index in range(begin, end + 1)]


def _cut(polygon: Polygon, axis: int, bound: float, sign: float) -> Polygon:
    kept: Polygon = []
    before = polygon[-1]
    before_depth = sign * (before[axis] - bound)
    for corner in polygon:
        depth = sign * (corner[axis] - bound)
        if (depth < 0.0) != (before_depth < 0.0):
            share = before_depth / (before_depth - depth)
            x = before[0] + share * (corner[0] - before[0])
            y = before[1] + share * (corner[1] - before[1])
            kept.append((bound, y) if axis == 0 else (x, bound))
        if depth >= 0.0:
            kept.append(corner)
        before, before_depth = corner, depth
    return _without_repeats(kept)


def _without_repeats(polygon: Polygon) -> Polygon:
    kept = [
        corner
        for corner, before in zip(polygon, polygon[-1:] + polygon[:-1], strict=True)
        if abs(corner[0] - before[0]) + abs(corner[1] - before[1]) > TINY
    ]
    return kept or polygon[:1]
