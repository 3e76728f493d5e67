//! A picture of characters: a rectangle of cells, each with a glyph and what it means. Pure; the screen adds colour by meaning.

/// A rectangle of cells. The default of `R` is the meaning of a blank.
#[derive(Clone, Debug, PartialEq)]
pub struct Picture<R> {
    /// Width in cells.
    pub width: usize,
    /// Height in cells.
    pub height: usize,
    cells: Vec<(char, R)>,
}

impl<R: Copy + Default> Picture<R> {
    /// An empty picture.
    pub fn new(width: usize, height: usize) -> Self {
        Self {
            width,
            height,
            cells: vec![(' ', R::default()); width * height],
        }
    }

    /// The cell at a column and row; blank outside.
    pub fn cell(&self, x: usize, y: usize) -> (char, R) {
        let inside = (x < self.width).then(|| self.cells.get(y * self.width + x));
        inside.flatten().copied().unwrap_or((' ', R::default()))
    }

    /// Sets a cell; nothing happens outside.
    pub fn put(&mut self, x: usize, y: usize, glyph: char, role: R) {
        if x < self.width
            && let Some(cell) = self.cells.get_mut(y * self.width + x)
        {
            *cell = (glyph, role);
        }
    }

    /// Writes a text from a cell to the right; what does not fit is left out.
    pub fn write(&mut self, x: usize, y: usize, text: &str, role: R) {
        for (k, glyph) in text.chars().enumerate() {
            self.put(x + k, y, glyph, role);
        }
    }

    /// The rows as text without trailing blanks.
    pub fn lines(&self) -> Vec<String> {
        (0..self.height)
            .map(|y| {
                (0..self.width)
                    .map(|x| self.cell(x, y).0)
                    .collect::<String>()
                    .trim_end()
                    .to_owned()
            })
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_lies_outside_is_blank_and_stays_out() {
        let mut picture = Picture::<u8>::new(4, 2);
        picture.write(2, 1, "abc", 7);
        picture.put(0, 5, 'x', 7);
        assert_eq!(picture.lines(), ["", "  ab"]);
        assert_eq!(picture.cell(3, 1), ('b', 7));
        assert_eq!(picture.cell(4, 0), (' ', 0));
        assert_eq!(picture.cell(0, 2), (' ', 0));
        assert_eq!(Picture::<u8>::new(0, 0).cell(0, 0), (' ', 0));
    }
}
