//! The name that was probably meant.

/// The name nearest to a word, if it is near enough to be meant: at most a third of the letters differ.
#[must_use]
pub fn nearest<'n>(word: &str, names: impl Iterator<Item = &'n str>) -> Option<&'n str> {
    let word: Vec<char> = word.to_lowercase().chars().collect();
    let most = (word.len() / 3).max(1);
    if word.len() > 64 {
        return None;
    }
    names
        .map(|name| (distance(&word, &name.to_lowercase().chars().collect::<Vec<_>>()), name))
        .filter(|(distance, _)| *distance <= most)
        .min_by_key(|(distance, _)| *distance)
        .map(|(_, name)| name)
}

/// Letters to insert, delete, replace or exchange with their neighbour.
fn distance(a: &[char], b: &[char]) -> usize {
    let mut rows = vec![vec![0; b.len() + 1]; a.len() + 1];
    for i in 0..=a.len() {
        for j in 0..=b.len() {
            rows[i][j] = if i == 0 || j == 0 {
                i + j
            } else {
                let replaced = rows[i - 1][j - 1] + usize::from(a[i - 1] != b[j - 1]);
                let swapped = i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1];
                let exchanged = if swapped { rows[i - 2][j - 2] + 1 } else { usize::MAX };
                replaced.min(rows[i - 1][j] + 1).min(rows[i][j - 1] + 1).min(exchanged)
            };
        }
    }
    rows[a.len()][b.len()]
}
