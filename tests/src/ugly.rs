//! Schedules at their ugliest: zeros, ties, rates of hundreds of decades, withdrawals of everything, phases that switch laws.

/// Extremes of every law, of whirling reinforcement, of many joins, phases and closing ranges.
pub fn extremes() -> Vec<String> {
    let laws = [
        "aimed",
        "area",
        "logarithmic",
        "search&x.half=3",
        "power&x.p=2.5&x.q=0.3",
        "power&x.p=0.1&x.q=3",
    ];
    let extremes = ["1e9", "1e-300", "0", "0.05", "1e-9"];
    let joins = |sign: &str| {
        let items = (0..20).map(|n| format!("{sign}{}@{}", 1e9 / f64::from(n + 1), f64::from(n) * 1e-3));
        items.collect::<Vec<_>>().join(",")
    };
    let phases: String = (1..=9)
        .map(|n| format!("&phase{n}.from={n}&phase{n}.y.rate={}e{}", n, 3 * n - 20))
        .collect();
    let mut links = Vec::new();
    for (place, law) in laws.iter().enumerate() {
        for rate in extremes {
            let other = extremes[(place + rate.len()) % extremes.len()];
            let base = format!("x.start=1e9&x.fire={law}&x.rate={rate}&y.start=1&y.rate={other}");
            let whirl = "x.wastage=1e9&y.support.area=1e9&y.flow=1e9@0/&x.flow=1e-300@1e-9/1e9";
            links.push(format!("{base}&{whirl}"));
            links.push(format!("{base}&x.join={}&y.join={}", joins(""), joins("-")));
            links.push(format!("{base}&y.fire=logarithmic{phases}&y.flow=3@0/"));
            links.push(format!(
                "{base}&y.wastage=1e-300&x.support.aimed=1e9&y.join=1e9@1e9&y.flow=1e9@1e-9/"
            ));
            links.push(format!(
                "{base}&range=1e9&range.closing=1e-9&x.reach=1e-9&y.reach=1e9&x.reach.shape=10&y.flow=1@0/"
            ));
            links.push(format!("{base}&range=1e9&range.closing=1e9&x.reach=1e9&x.reach.shape=0.5&y.reach=1&x.wastage=1&until=1e9"));
        }
    }
    links
}

/// Numbers that look random and are the same every time: xorshift64.
struct Draw(u64);

impl Draw {
    fn number(&mut self, most: usize) -> usize {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 >> 33) as usize % most
    }

    fn one_in(&mut self, many: usize) -> bool {
        self.number(many) == 0
    }

    fn of<'a>(&mut self, choices: &[&'a str]) -> &'a str {
        choices[self.number(choices.len())]
    }

    /// A decimal number that is nothing special, of any decade that an engagement may have.
    fn plain(&mut self, decades: usize) -> String {
        format!("{}e-{}", 1 + self.number(9999), self.number(decades))
    }

    /// A number of the ugly `choices`, or a plain one.
    fn ugly(&mut self, choices: &[&str], decades: usize) -> String {
        if self.one_in(3) {
            self.plain(decades)
        } else {
            self.of(choices).to_owned()
        }
    }

    fn rate(&mut self) -> String {
        const RATES: [&str; 14] = [
            "0", "1e-300", "1e-20", "1e-9", "1e-5", "0.001", "0.04", "0.09", "0.05", "1", "50", "1e5", "1e9",
            "0.04",
        ];
        self.ugly(&RATES, 8)
    }

    fn strength(&mut self) -> &'static str {
        self.of(&[
            "1e-9", "1", "2", "100", "400", "600", "600", "400", "1e5", "1e9", "0.1", "0.3", "1e-300",
        ])
    }

    fn time(&mut self) -> String {
        const TIMES: [&str; 14] = [
            "0",
            "0",
            "1",
            "1",
            "2",
            "5",
            "1e-9",
            "1e-300",
            "1e9",
            "3.0000000001",
            "3",
            "10",
            "20.11797",
            "0.3",
        ];
        self.ugly(&TIMES, 4)
    }

    fn fire(&mut self, before: &str) -> String {
        let law = self.of(&["aimed", "aimed", "area", "logarithmic", "search", "power", "none"]);
        let mut pairs = format!("&{before}fire={law}&{before}rate={}", self.rate());
        if law == "search" {
            pairs += &format!("&{before}half={}", self.of(&["0", "1e-9", "1", "80", "1e9"]));
        }
        if law == "power" {
            let exponents = ["0", "0.1", "0.4", "0.5", "0.99", "1", "1.5", "2", "2.5", "3"];
            pairs += &format!(
                "&{before}p={}&{before}q={}",
                self.of(&exponents),
                self.of(&exponents)
            );
        }
        pairs
    }

    fn side(&mut self, side: &str) -> String {
        let joins = if self.one_in(2) { self.number(7) } else { 0 };
        let flows = if self.one_in(3) { 1 + self.number(3) } else { 0 };
        let start = if joins + flows > 0 && self.one_in(4) {
            "0"
        } else {
            self.strength()
        };
        let mut pairs = format!("&{side}.start={start}{}", self.fire(&format!("{side}.")));
        if self.one_in(2) {
            pairs += &format!(
                "&{side}.break={}",
                self.of(&["0.5", "0.3", "1e-9", "0.999999999", "0.1"])
            );
        }
        if self.one_in(5) {
            pairs += &format!("&{side}.lost={}", self.of(&["0", "1", "100", "1e9"]));
        }
        for key in ["wastage", "support.area", "support.aimed"] {
            if self.one_in(4) {
                pairs += &format!("&{side}.{key}={}", self.rate());
            }
        }
        let list = |items: Vec<String>, key: &str| match items.is_empty() {
            true => String::new(),
            false => format!("&{side}.{key}={}", items.join(",")),
        };
        let join = |draw: &mut Draw| {
            let sign = draw.of(&["", "", "-"]);
            format!("{sign}{}@{}", draw.strength(), draw.time())
        };
        let joins: Vec<String> = (0..joins).map(|_| join(self)).collect();
        let flow = |draw: &mut Draw| {
            let to = if draw.one_in(2) {
                draw.time()
            } else {
                String::new()
            };
            format!("{}@{}/{to}", draw.rate(), draw.time())
        };
        let flows: Vec<String> = (0..flows).map(|_| flow(self)).collect();
        pairs + &list(joins, "join") + &list(flows, "flow")
    }

    fn closing(&mut self) -> String {
        let lengths = ["0", "1e-9", "1", "500", "900", "1e9"];
        let mut pairs = format!(
            "&range={}&range.closing={}&range.least={}",
            self.of(&lengths),
            self.rate(),
            self.of(&lengths[..4])
        );
        for side in ["x", "y"] {
            if !self.one_in(3) {
                let shape = self.of(&["0", "0.5", "1", "1.5", "2", "10"]);
                pairs += &format!(
                    "&{side}.reach={}&{side}.reach.shape={shape}",
                    self.of(&lengths[1..])
                );
            }
        }
        pairs
    }

    fn phase(&mut self, number: usize) -> String {
        let side = self.of(&["x", "y"]);
        let before = format!("phase{number}.{side}.");
        let change = match self.number(3) {
            0 => self.fire(&before),
            1 => format!("&{before}wastage={}", self.rate()),
            _ => format!("&{before}support.aimed={}", self.rate()),
        };
        format!("&phase{number}.from={}{change}", self.time())
    }
}

/// Ugly schedule number `index`; some are refused by their problems.
pub fn link(index: u32) -> String {
    let mut draw = Draw(u64::from(index).wrapping_mul(0x9e37_79b9_7f4a_7c15) ^ 0x1234_5678_9abc_def1);
    for _ in 0..4 {
        draw.number(2);
    }
    let mut link = draw.side("x") + &draw.side("y");
    if draw.one_in(4) {
        link += &draw.closing();
    }
    if draw.one_in(4) {
        for number in 1..2 + draw.number(4) {
            link += &draw.phase(number);
        }
    }
    if draw.one_in(3) {
        link += &format!("&until={}", draw.of(&["1", "5", "100", "1e9", "1e-9"]));
    }
    link.trim_start_matches('&').to_owned()
}
