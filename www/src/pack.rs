//! Packs the program as `aftercount-unpack` unpacks it.

use std::io::Write as _;

use anyhow::Result;
use lzma_rust2::{LzmaOptions, LzmaWriter};

/// How hard it is tried, of 0 to 9.
const HARDEST: u32 = 9;

/// The bytes packed by LZMA with four bits of literal context and none of position, the same ones each time.
pub(crate) fn packed(bytes: &[u8]) -> Result<Vec<u8>> {
    let mut options = LzmaOptions::with_preset(HARDEST);
    (options.lc, options.lp, options.pb) = (4, 0, 0);
    // Half a per cent less than the preset's, for seconds of the build.
    (options.nice_len, options.depth_limit) = (LzmaOptions::NICE_LEN_MAX, 2_000);
    let mut writer = LzmaWriter::new_use_header(Vec::new(), &options, Some(bytes.len() as u64))?;
    writer.write_all(bytes)?;
    Ok(writer.finish()?)
}

/// Bytes as pairs of hexadecimal digits. What stands in the page as it is, and not packed, stands there so: gzip finds
/// again in them what base64, which begins bytes at four places, hides.
pub(crate) fn hex(bytes: &[u8]) -> String {
    bytes.iter().map(|byte| format!("{byte:02x}")).collect()
}

#[cfg(test)]
mod tests {
    use super::{hex, packed};
    use aftercount_unpack::unpacked;

    #[test]
    fn what_was_packed_is_unpacked() {
        // Text, what a program looks like, noise, and long repetitions.
        let mut noise = 1_u32;
        let noise: Vec<u8> = (0..70_000)
            .map(|_| {
                noise = noise.wrapping_mul(1_664_525).wrapping_add(1_013_904_223);
                (noise >> 24) as u8
            })
            .collect();
        let own = include_bytes!("pack.rs");
        let far = [&noise[..], own, &noise[..60_000], own].concat();
        for bytes in [
            &b""[..],
            b"a",
            b"aaaaaaaaaaaaaaaaaaaaaaab",
            own,
            &noise,
            &far,
            &[0; 100_000],
            &own.repeat(40),
        ] {
            let small = packed(bytes).expect("it packs");
            assert!(unpacked(&small) == bytes, "{} bytes", bytes.len());
        }
    }

    #[test]
    fn every_byte_has_two_digits() {
        assert_eq!(hex(&[0, 7, 0x80, 0xff]), "000780ff");
    }

    #[test]
    fn a_broken_stream_is_no_reason_to_stop() {
        let sound = packed(&include_bytes!("pack.rs").repeat(3)).expect("it packs");
        // Behind the header, whose length would be believed.
        for place in 13..sound.len().min(400) {
            let mut broken = sound.clone();
            broken[place] ^= 0x55;
            assert_eq!(unpacked(&broken).len(), unpacked(&sound).len());
            assert_eq!(unpacked(&sound[..place]).len(), unpacked(&sound).len());
        }
        assert!(unpacked(b"no stream of ours").is_empty());
        assert!(unpacked(&[3; 20]).is_empty(), "longer than any program");
    }
}
