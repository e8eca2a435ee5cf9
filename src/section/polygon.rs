//! Any polygon with holes.

use super::edge::{Edge, Point};
use super::shape::ShapeError;
use super::{Methods, Properties, integral, torsion};

/// More corners than any real section; keeps the test for crossings short.
const MOST_POINTS: usize = 1000;

pub(super) fn polygon(
    points: &[Point],
    holes: &[Vec<Point>],
    torsion_constant: Option<f64>,
) -> Result<Properties, ShapeError> {
    if points.len() + holes.iter().map(Vec::len).sum::<usize>() > MOST_POINTS {
        return Err(ShapeError::new("points", format!("more than {MOST_POINTS} points")));
    }
    let mut loops = vec![ordered("points", points, false)?];
    for hole in holes {
        loops.push(ordered("holes", hole, true)?);
    }
    simple(&loops)?;
    for hole in &loops[1..] {
        if !inside(hole[0], &loops[0]) {
            return Err(ShapeError::new("holes", "a hole lies outside the polygon"));
        }
    }
    for (i, hole) in loops[1..].iter().enumerate() {
        if loops[1..].iter().enumerate().any(|(j, o)| i != j && inside(hole[0], o)) {
            return Err(ShapeError::new("holes", "a hole lies inside another"));
        }
    }
    let section =
        integral::properties(&loops.iter().map(|corners| lines(corners)).collect::<Vec<_>>());
    let (i_t, method) = match torsion_constant {
        Some(given) if given > 0.0 && given.is_finite() => (given, None),
        Some(_) => {
            return Err(ShapeError::new("torsion_constant", "I_t must be greater than zero"));
        }
        None if holes.is_empty() => {
            (torsion::compact(section.area, section.i_y + section.i_z), Some(torsion::COMPACT))
        }
        None => {
            return Err(ShapeError::new(
                "torsion_constant",
                "a polygon with holes needs its torsion constant I_t stated",
            ));
        }
    };
    Ok(Properties { i_t, methods: Methods { torsion: method, ..Methods::default() }, ..section })
}

/// Corners of one loop, turned the right way round.
fn ordered(key: &'static str, points: &[Point], hole: bool) -> Result<Vec<Point>, ShapeError> {
    let n = points.len();
    if n < 3 {
        return Err(ShapeError::new(key, format!("`{key}` needs at least three points to a loop")));
    }
    if points.iter().flatten().any(|value| !value.is_finite() || value.abs() > 1e3) {
        return Err(ShapeError::new(key, format!("`{key}` must lie within 1 km")));
    }
    for i in 0..n {
        let [a, b] = [points[i], points[(i + 1) % n]];
        if (a[0] - b[0]).abs() + (a[1] - b[1]).abs() < 1e-9 {
            let message = format!("points {} and {} of `{key}` coincide", i + 1, (i + 1) % n + 1);
            return Err(ShapeError::new(key, message));
        }
    }
    let area: f64 = (0..n).map(|i| cross(points[0], points[i], points[(i + 1) % n])).sum();
    let mut ordered = points.to_vec();
    if (area < 0.0) != hole {
        ordered.reverse();
    }
    Ok(ordered)
}

fn sides(corners: &[Point]) -> impl Iterator<Item = (Point, Point)> {
    (0..corners.len()).map(|i| (corners[i], corners[(i + 1) % corners.len()]))
}

fn lines(corners: &[Point]) -> Vec<Edge> {
    sides(corners).map(|(a, b)| Edge::Line(a, b)).collect()
}

/// No edge crosses or touches another that is not its neighbour, in and between loops.
fn simple(loops: &[Vec<Point>]) -> Result<(), ShapeError> {
    let all: Vec<(usize, usize, Point, Point)> = loops
        .iter()
        .enumerate()
        .flat_map(|(l, corners)| sides(corners).enumerate().map(move |(i, (a, b))| (l, i, a, b)))
        .collect();
    for (k, &(l, i, a, b)) in all.iter().enumerate() {
        for &(m, j, c, d) in &all[k + 1..] {
            let n = loops[l].len();
            let neighbours = l == m && ((i + 1) % n == j || (j + 1) % n == i);
            // Neighbours share a corner; they only meet elsewhere by folding back.
            let meet = if neighbours {
                let (corner, p, q) = if (i + 1) % n == j { (b, a, d) } else { (a, b, c) };
                let along = (p[0] - corner[0]) * (q[0] - corner[0])
                    + (p[1] - corner[1]) * (q[1] - corner[1]);
                along > 0.0 && cross(corner, p, q).abs() <= 1e-12 * along
            } else {
                crosses(a, b, c, d)
            };
            if meet {
                return Err(if l == m {
                    let key = if l == 0 { "points" } else { "holes" };
                    ShapeError::new(key, format!("the outline in `{key}` crosses itself"))
                } else if l == 0 {
                    ShapeError::new("holes", "a hole meets the outer edge")
                } else {
                    ShapeError::new("holes", "two holes meet")
                });
            }
        }
    }
    Ok(())
}

/// Twice the signed area of a triangle.
fn cross(a: Point, b: Point, c: Point) -> f64 {
    (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])
}

fn crosses(a: Point, b: Point, c: Point, d: Point) -> bool {
    let [abc, abd, cda, cdb] = [cross(a, b, c), cross(a, b, d), cross(c, d, a), cross(c, d, b)];
    let apart = |p: f64, q: f64| (p > 0.0 && q > 0.0) || (p < 0.0 && q < 0.0);
    if apart(abc, abd) || apart(cda, cdb) {
        return false;
    }
    // On one line: they meet where their boxes do.
    [0, 1].into_iter().all(|k| a[k].min(b[k]) <= c[k].max(d[k]) && c[k].min(d[k]) <= a[k].max(b[k]))
}

/// Counts the sides crossed on the way out along +y.
fn inside(point: Point, corners: &[Point]) -> bool {
    sides(corners)
        .filter(|(a, b)| {
            (a[1] > point[1]) != (b[1] > point[1])
                && a[0] + (point[1] - a[1]) * (b[0] - a[0]) / (b[1] - a[1]) > point[0]
        })
        .count()
        % 2
        == 1
}
