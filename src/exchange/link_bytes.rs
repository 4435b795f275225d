//! The bytes of a link: small whole numbers in few bytes, columns of like things as runs.

/// Bytes being written.
#[derive(Default)]
pub(super) struct Writer {
    pub(super) bytes: Vec<u8>,
}

impl Writer {
    /// A whole number, seven bits a byte, least first.
    pub(super) fn number(&mut self, mut value: u64) {
        while value >= 0x80 {
            self.bytes.push((value & 0x7f) as u8 | 0x80);
            value >>= 7;
        }
        self.bytes.push(value as u8);
    }

    /// A signed number: small in size, small in bytes.
    pub(super) fn signed(&mut self, value: i64) {
        self.number(((value << 1) ^ (value >> 63)) as u64);
    }

    pub(super) fn text(&mut self, text: &str) {
        self.number(text.len() as u64);
        self.bytes.extend_from_slice(text.as_bytes());
    }

    /// A column of codes, as (code, how many times) pairs.
    pub(super) fn runs(&mut self, codes: &[u64]) {
        let mut rest = codes;
        while let Some(&code) = rest.first() {
            let count = rest.iter().take_while(|other| **other == code).count();
            self.number(code);
            self.number(count as u64);
            rest = &rest[count..];
        }
    }
}

/// Bytes being read. Every read is checked; a link that ends early or holds what it cannot is damaged.
pub(super) struct Reader<'a> {
    rest: &'a [u8],
}

/// The bytes are not those of a link.
#[derive(Debug, PartialEq, Eq)]
pub(super) struct Damaged;

impl<'a> Reader<'a> {
    pub(super) fn new(bytes: &'a [u8]) -> Reader<'a> {
        Reader { rest: bytes }
    }

    pub(super) fn is_done(&self) -> bool {
        self.rest.is_empty()
    }

    pub(super) fn byte(&mut self) -> Result<u8, Damaged> {
        let (&first, rest) = self.rest.split_first().ok_or(Damaged)?;
        self.rest = rest;
        Ok(first)
    }

    pub(super) fn number(&mut self) -> Result<u64, Damaged> {
        let mut value = 0u64;
        for shift in (0..64).step_by(7) {
            let byte = self.byte()?;
            let bits = u64::from(byte & 0x7f);
            if shift == 63 && bits > 1 {
                return Err(Damaged);
            }
            value |= bits << shift;
            if byte & 0x80 == 0 {
                return Ok(value);
            }
        }
        Err(Damaged)
    }

    pub(super) fn signed(&mut self) -> Result<i64, Damaged> {
        let value = self.number()?;
        Ok((value >> 1) as i64 ^ -((value & 1) as i64))
    }

    /// A whole number that is at most `limit`.
    pub(super) fn count(&mut self, limit: usize) -> Result<usize, Damaged> {
        usize::try_from(self.number()?).ok().filter(|count| *count <= limit).ok_or(Damaged)
    }

    pub(super) fn text(&mut self) -> Result<&'a str, Damaged> {
        let length = self.count(self.rest.len())?;
        let (text, rest) = self.rest.split_at_checked(length).ok_or(Damaged)?;
        self.rest = rest;
        std::str::from_utf8(text).map_err(|_| Damaged)
    }

    /// A column of codes of known length.
    pub(super) fn runs(&mut self, length: usize) -> Result<Vec<u64>, Damaged> {
        let mut codes = Vec::new();
        while codes.len() < length {
            let code = self.number()?;
            let count = self.count(length - codes.len())?;
            if count == 0 {
                return Err(Damaged);
            }
            codes.extend(std::iter::repeat_n(code, count));
        }
        Ok(codes)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_come_back() {
        for value in [0, 1, -1, 63, -64, 64, 8191, i64::MAX, i64::MIN] {
            let mut writer = Writer::default();
            writer.signed(value);
            writer.number(value.unsigned_abs());
            let mut reader = Reader::new(&writer.bytes);
            assert_eq!((reader.signed(), reader.number()), (Ok(value), Ok(value.unsigned_abs())));
            assert!(reader.is_done());
        }
    }

    #[test]
    fn runs_come_back_and_false_ones_are_refused() {
        let mut writer = Writer::default();
        writer.runs(&[5, 5, 5, 0, 9]);
        assert_eq!(Reader::new(&writer.bytes).runs(5), Ok(vec![5, 5, 5, 0, 9]));
        assert_eq!(Reader::new(&writer.bytes).runs(2), Err(Damaged), "a run beyond the end");
        assert_eq!(Reader::new(&[1, 0]).runs(3), Err(Damaged), "an empty run");
        assert_eq!(Reader::new(&[0xff; 20]).number(), Err(Damaged), "a number without end");
        assert_eq!(Reader::new(&[2, 65]).text(), Err(Damaged), "a text that is longer than what is left");
        assert_eq!(Reader::new(&[1, 65]).text(), Ok("A"));
    }
}
