//! LZMA as I. Pavlov's specification describes it (LZMA SDK, `lzma-specification.txt`), for streams with a header that
//! were packed with four bits of literal context and none of position.
//!
//! Every table has a power of two of entries and is read at an index cut to fit, so that no stream, however broken, can
//! make it panic; what it gives then is not what was packed, and the browser refuses it as a program.

/// What a header says of four bits of literal context and none of position.
const PROPERTIES: u8 = 4;

/// The length of a header: the properties, the size of the window, the length of what was packed.
const HEADER: usize = 13;

/// The chance of a bit in parts of 2048, at the beginning.
const EVEN: Chance = 1024;

/// The most that is unpacked, in bytes: far beyond any program of ours.
const MOST: u64 = 1 << 26;

/// How likely a bit is 0, in parts of 2048.
type Chance = u16;

/// A chance for each state that the packer can be in.
type ByState = [Chance; 16];

/// The bytes that were packed; none where the stream is of another kind, or too long.
pub fn unpacked(packed: &[u8]) -> Vec<u8> {
    let mut out = Vec::new();
    let Some((header, stream)) = packed.split_at_checked(HEADER) else {
        return out;
    };
    let digits = header.iter().skip(5).rev();
    let length = digits.fold(0, |sum, byte| sum << 8 | u64::from(*byte));
    let ours = header.first() == Some(&PROPERTIES) && length <= MOST;
    // Asked for with an answer: without, the page would carry words for the case that there is no memory.
    if ours && out.try_reserve_exact(length as usize).is_ok() {
        out.resize(length as usize, 0);
        Unpacker::new(stream).fill(&mut out);
    }
    out
}

/// The stream of bits, by their chances.
struct Bits<'a> {
    code: u32,
    range: u32,
    bytes: std::slice::Iter<'a, u8>,
}

impl Bits<'_> {
    fn new(stream: &[u8]) -> Bits<'_> {
        let mut bits = Bits {
            code: 0,
            range: u32::MAX,
            bytes: stream.iter(),
        };
        for _ in 0..5 {
            bits.take_byte();
        }
        bits
    }

    fn take_byte(&mut self) {
        self.code = self.code << 8 | self.bytes.next().map_or(0, |byte| u32::from(*byte));
    }

    fn widen(&mut self) {
        if self.range < 1 << 24 {
            self.range <<= 8;
            self.take_byte();
        }
    }

    fn bit(&mut self, chance: &mut Chance) -> usize {
        let bound = (self.range >> 11).wrapping_mul(u32::from(*chance));
        let bit = usize::from(self.code >= bound);
        if bit == 0 {
            self.range = bound;
            *chance = chance.wrapping_add(2048_u16.wrapping_sub(*chance) >> 5);
        } else {
            self.range = self.range.wrapping_sub(bound);
            self.code = self.code.wrapping_sub(bound);
            *chance -= *chance >> 5;
        }
        self.widen();
        bit
    }

    /// Bits that are 0 as often as 1, the highest first.
    fn even_bits(&mut self, count: u32) -> usize {
        let mut value = 0;
        for _ in 0..count {
            self.range >>= 1;
            let bit = usize::from(self.code >= self.range);
            if bit == 1 {
                self.code = self.code.wrapping_sub(self.range);
            }
            value = value << 1 | bit;
            self.widen();
        }
        value
    }

    /// A number of so many bits, the highest first, each with chances of its own for what came before.
    fn number<const N: usize>(&mut self, chances: &mut [Chance; N], bits: u32) -> usize {
        let mut at = 1;
        for _ in 0..bits {
            at = at << 1 | self.bit(&mut chances[at & (N - 1)]);
        }
        at - (1 << bits)
    }

    /// The same with the lowest bit first, in the chances from a place on.
    fn number_backwards<const N: usize>(
        &mut self,
        chances: &mut [Chance; N],
        from: usize,
        bits: u32,
    ) -> usize {
        let (mut at, mut value) = (1, 0);
        for place in 0..bits {
            let bit = self.bit(&mut chances[from.wrapping_add(at) & (N - 1)]);
            at = at << 1 | bit;
            value |= bit << place;
        }
        value
    }
}

/// The lengths of what is repeated.
struct Lengths {
    beyond: [Chance; 2],
    low: [Chance; 8],
    middle: [Chance; 8],
    high: [Chance; 256],
}

impl Lengths {
    fn new() -> Lengths {
        Lengths {
            beyond: [EVEN; 2],
            low: [EVEN; 8],
            middle: [EVEN; 8],
            high: [EVEN; 256],
        }
    }

    /// A length less the two of the shortest.
    fn read(&mut self, bits: &mut Bits<'_>) -> usize {
        if bits.bit(&mut self.beyond[0]) == 0 {
            bits.number(&mut self.low, 3)
        } else if bits.bit(&mut self.beyond[1]) == 0 {
            8 + bits.number(&mut self.middle, 3)
        } else {
            16 + bits.number(&mut self.high, 8)
        }
    }
}

/// The distances back to what is repeated.
struct Distances {
    slots: [[Chance; 64]; 4],
    near: [Chance; 128],
    low: [Chance; 16],
}

impl Distances {
    fn read(&mut self, bits: &mut Bits<'_>, length: usize) -> usize {
        let slot = bits.number(&mut self.slots[length.min(3)], 6);
        if slot < 4 {
            return slot;
        }
        let rest = (slot as u32 >> 1) - 1;
        let distance = (2 | slot & 1) << rest;
        if slot < 14 {
            distance + bits.number_backwards(&mut self.near, distance - slot, rest)
        } else {
            let high = bits.even_bits(rest - 4) << 4;
            distance + high + bits.number_backwards(&mut self.low, 0, 4)
        }
    }
}

/// What comes next in the stream.
struct Unpacker<'a> {
    bits: Bits<'a>,
    state: usize,
    /// The last four distances, less one, the latest first.
    distances: [usize; 4],
    literal: [Chance; 16384],
    is_match: ByState,
    is_known: ByState,
    is_older: [ByState; 3],
    is_longer: ByState,
    new_lengths: Lengths,
    known_lengths: Lengths,
    new_distances: Distances,
}

impl Unpacker<'_> {
    fn new(stream: &[u8]) -> Unpacker<'_> {
        Unpacker {
            bits: Bits::new(stream),
            state: 0,
            distances: [0; 4],
            literal: [EVEN; 16384],
            is_match: [EVEN; 16],
            is_known: [EVEN; 16],
            is_older: [[EVEN; 16]; 3],
            is_longer: [EVEN; 16],
            new_lengths: Lengths::new(),
            known_lengths: Lengths::new(),
            new_distances: Distances {
                slots: [[EVEN; 64]; 4],
                near: [EVEN; 128],
                low: [EVEN; 16],
            },
        }
    }

    fn fill(&mut self, out: &mut [u8]) {
        let mut at = 0;
        while at < out.len() {
            if self.bits.bit(&mut self.is_match[self.state & 15]) == 0 {
                let byte = self.byte(back(out, at, 0), back(out, at, self.distances[0]));
                put(out, at, byte);
                at += 1;
                self.state = match self.state {
                    0..4 => 0,
                    4..10 => self.state - 3,
                    _ => self.state - 6,
                };
            } else {
                for _ in 0..self.length() {
                    let byte = back(out, at, self.distances[0]);
                    put(out, at, byte);
                    at += 1;
                }
            }
        }
    }

    /// A byte of its own, by the one before it; behind a repetition also by the one that would have come next there.
    fn byte(&mut self, before: u8, expected: u8) -> u8 {
        let context = usize::from(before >> 4) * 0x300;
        let (mut expected, mut symbol) = (usize::from(expected), 1);
        let mut as_expected = self.state >= 7;
        while symbol < 0x100 {
            let bit = expected >> 7 & 1;
            expected <<= 1;
            let table = if as_expected { 1 + bit } else { 0 };
            let place = context + (table << 8) + symbol;
            let got = self.bits.bit(&mut self.literal[place & 16383]);
            symbol = symbol << 1 | got;
            as_expected &= got == bit;
        }
        symbol as u8
    }

    /// How many bytes are repeated; the first of the distances is then how far back they are.
    fn length(&mut self) -> usize {
        let state = self.state & 15;
        let after_byte = self.state < 7;
        if self.bits.bit(&mut self.is_known[state]) == 0 {
            self.distances.rotate_right(1);
            let length = self.new_lengths.read(&mut self.bits);
            self.distances[0] = self.new_distances.read(&mut self.bits, length);
            self.state = if after_byte { 7 } else { 10 };
            return length + 2;
        }
        let mut age = 0;
        while age < 3 && self.bits.bit(&mut self.is_older[age][state]) == 1 {
            age += 1;
        }
        if age == 0 && self.bits.bit(&mut self.is_longer[state]) == 0 {
            self.state = if after_byte { 9 } else { 11 };
            return 1;
        }
        self.distances[..=age].rotate_right(1);
        self.state = if after_byte { 8 } else { 11 };
        self.known_lengths.read(&mut self.bits) + 2
    }
}

/// The byte so far back from a place, less one; 0 before the beginning.
fn back(out: &[u8], at: usize, distance: usize) -> u8 {
    let place = at.wrapping_sub(distance).wrapping_sub(1);
    out.get(place).copied().unwrap_or(0)
}

fn put(out: &mut [u8], at: usize, byte: u8) {
    if let Some(place) = out.get_mut(at) {
        *place = byte;
    }
}
