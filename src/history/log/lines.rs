//! Bytes cut into lines, with a limit on their length, so that a file of one endless line costs no memory.

use std::io::{BufRead, Read, Result};

use super::limits;

/// What the next line is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Line {
    /// A line; its bytes are in [`Lines::bytes`].
    Here,
    /// A line above the limit, skipped; only its beginning is in [`Lines::bytes`].
    TooLong,
    /// The file has ended.
    End,
}

/// Reads line after line into one buffer.
pub(super) struct Lines {
    input: Box<dyn BufRead>,
    buffer: Vec<u8>,
    /// Lines that were read already and are to be read again, first one last.
    again: Vec<(Line, Vec<u8>)>,
    number: usize,
}

impl Lines {
    pub fn new(input: Box<dyn BufRead>) -> Self {
        Self {
            input,
            buffer: Vec::new(),
            again: Vec::new(),
            number: 0,
        }
    }

    /// The bytes of the line last read, without its end.
    pub fn bytes(&self) -> &[u8] {
        &self.buffer
    }

    /// The number of the line last read, from 1.
    pub fn number(&self) -> usize {
        self.number
    }

    /// Has these lines (first one first), the last ones read, read again.
    pub fn reread(&mut self, lines: Vec<(Line, Vec<u8>)>) {
        self.number = self.number.saturating_sub(lines.len());
        self.again.extend(lines.into_iter().rev());
    }

    /// Reads the next line. A byte order mark before the first is left out.
    pub fn next(&mut self) -> Result<Line> {
        if let Some((line, bytes)) = self.again.pop() {
            self.buffer = bytes;
            self.number += 1;
            return Ok(line);
        }
        self.buffer.clear();
        let most = limits::ROW as u64 + 2;
        let taken = self
            .input
            .by_ref()
            .take(most)
            .read_until(b'\n', &mut self.buffer)?;
        if taken == 0 {
            return Ok(Line::End);
        }
        self.number += 1;
        let whole = self.buffer.last() == Some(&b'\n');
        if whole {
            self.buffer.pop();
            if self.buffer.last() == Some(&b'\r') {
                self.buffer.pop();
            }
        }
        if self.number == 1 && self.buffer.starts_with(b"\xef\xbb\xbf") {
            self.buffer.drain(..3);
        }
        if self.buffer.len() > limits::ROW {
            if !whole {
                self.skip_rest()?;
            }
            return Ok(Line::TooLong);
        }
        Ok(Line::Here)
    }

    fn skip_rest(&mut self) -> Result<()> {
        loop {
            let chunk = self.input.fill_buf()?;
            if chunk.is_empty() {
                return Ok(());
            }
            let end = chunk.iter().position(|b| *b == b'\n');
            let used = end.map_or(chunk.len(), |at| at + 1);
            self.input.consume(used);
            if end.is_some() {
                return Ok(());
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::io::Cursor;

    fn all(text: &[u8]) -> Vec<(Line, usize, Vec<u8>)> {
        let mut lines = Lines::new(Box::new(Cursor::new(text.to_vec())));
        let mut found = Vec::new();
        while let Ok(line @ (Line::Here | Line::TooLong)) = lines.next() {
            let shown = lines.bytes().iter().copied().take(4).collect();
            found.push((line, lines.number(), shown));
        }
        found
    }

    #[test]
    fn ends_of_every_kind() {
        assert_eq!(
            all(b"\xef\xbb\xbfa\r\n\nb"),
            [
                (Line::Here, 1, b"a".to_vec()),
                (Line::Here, 2, Vec::new()),
                (Line::Here, 3, b"b".to_vec()),
            ]
        );
        assert_eq!(all(b""), []);
    }

    #[test]
    fn long_lines_are_skipped_whole() {
        for length in [
            limits::ROW,
            limits::ROW + 1,
            limits::ROW + 2,
            limits::ROW + 3,
            3 * limits::ROW,
        ] {
            let mut text = vec![b'x'; length];
            text.extend(b"\nb\n");
            let first = if length > limits::ROW {
                Line::TooLong
            } else {
                Line::Here
            };
            let expected = [(first, 1, b"xxxx".to_vec()), (Line::Here, 2, b"b".to_vec())];
            assert_eq!(all(&text), expected, "{length}");
        }
    }

    #[test]
    fn lines_can_be_read_again() {
        let mut lines = Lines::new(Box::new(Cursor::new(b"a\nb\nc\n".to_vec())));
        for _ in 0..3 {
            assert!(matches!(lines.next(), Ok(Line::Here)));
        }
        lines.reread(vec![
            (Line::Here, b"b".to_vec()),
            (Line::Here, b"c".to_vec()),
        ]);
        assert!(matches!(lines.next(), Ok(Line::Here)));
        assert_eq!((lines.number(), lines.bytes()), (2, b"b".as_slice()));
        assert!(matches!(lines.next(), Ok(Line::Here)));
        assert_eq!((lines.number(), lines.bytes()), (3, b"c".as_slice()));
        assert!(matches!(lines.next(), Ok(Line::End)));
    }
}
