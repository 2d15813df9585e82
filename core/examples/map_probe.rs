//! probe
use aftercount_core::asked::Chart;
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
fn main() {
    for line in std::io::stdin().lines() {
        let line = line.expect("text");
        let pairs = Pairs::parse(&line);
        let statement = Statement::read(&pairs).expect("reads");
        let mut best = f64::INFINITY;
        let mut n = 0;
        let mut flips = vec![];
        for _ in 0..5 {
            let t = std::time::Instant::now();
            let mut chart = Chart::new(&pairs, &statement).expect("two");
            while !chart.go_on(1000) {}
            best = best.min(t.elapsed().as_secs_f64());
            n = chart.fights();
            flips = chart.flips();
        }
        println!(
            "{:.1} ms {} fights, {} lines: {:?}",
            best * 1e3,
            n,
            flips.len(),
            flips.iter().map(|f| f.points.len()).collect::<Vec<_>>()
        );
    }
}
