//! Formulas that are written twice at once: as MathML for the page and as plain text to copy.

use super::format::{MINUS, plain, six};

/// A formula, or a part of one.
#[derive(Clone, Debug, PartialEq)]
pub struct Math {
    /// As MathML, without the `<math>` around it.
    pub mathml: String,
    /// As one line of plain text.
    pub text: String,
    /// Whether the text needs brackets beside a product or a power.
    loose: bool,
}

impl Math {
    fn new(mathml: String, text: String, loose: bool) -> Math {
        Math { mathml, text, loose }
    }

    /// The text as part of a product.
    fn bracketed(&self) -> String {
        if self.loose {
            format!("({})", self.text)
        } else {
            self.text.clone()
        }
    }

    /// The MathML as part of a product.
    fn bracketed_mathml(&self) -> String {
        if self.loose {
            format!("<mo>(</mo>{}<mo>)</mo>", self.mathml)
        } else {
            self.mathml.clone()
        }
    }

    /// The whole formula with the `<math>` around it.
    pub fn to_mathml(&self) -> String {
        format!("<math><mrow>{}</mrow></math>", self.mathml)
    }
}

/// A number to six significant digits.
pub fn number(value: f64) -> Math {
    let written = plain(&six(value));
    let negative = value < 0.0;
    let mathml = match written.split_once(" × 10") {
        // A power of ten is written with its exponent raised by the markup.
        Some((mantissa, _)) => {
            let exponent = format!("{value:.5e}")
                .split_once('e')
                .map(|(_, e)| e.replace('-', MINUS))
                .unwrap_or_default();
            format!("<mn>{mantissa}</mn><mo>·</mo><msup><mn>10</mn><mn>{exponent}</mn></msup>")
        }
        None => format!("<mn>{written}</mn>"),
    };
    let scientific = written.contains('×');
    Math::new(mathml, written, negative || scientific)
}

/// A letter.
pub fn letter(name: &str) -> Math {
    Math::new(format!("<mi>{name}</mi>"), name.into(), false)
}

/// A letter with a mark at its foot: x₀.
pub fn marked(name: &str, foot: &str) -> Math {
    let (small, element) = match foot {
        "0" => ("₀".to_owned(), "mn"),
        "1" => ("₁".to_owned(), "mn"),
        other => (format!("_{other}"), "mi"),
    };
    Math::new(
        format!("<msub><mi>{name}</mi><{element}>{foot}</{element}></msub>"),
        format!("{name}{small}"),
        false,
    )
}

/// Parts joined by a sign of a sum or a relation.
fn joined(parts: &[Math], sign: &str, loose: bool) -> Math {
    let mathml: Vec<&str> = parts.iter().map(|part| part.mathml.as_str()).collect();
    let text: Vec<&str> = parts.iter().map(|part| part.text.as_str()).collect();
    Math::new(
        mathml.join(&format!("<mo>{sign}</mo>")),
        text.join(&format!(" {sign} ")),
        loose,
    )
}

/// a = b = c.
pub fn equal(parts: &[Math]) -> Math {
    joined(parts, "=", true)
}

/// Two statements side by side.
pub fn beside(first: &Math, second: &Math) -> Math {
    // A bracket grows with what it holds, and would reach down to the comma.
    let room = if first.mathml.ends_with("<mo>)</mo>") {
        " lspace=\"0.2em\""
    } else {
        ""
    };
    Math {
        mathml: format!(
            "{}<mo{room}>,</mo><mspace width=\"1em\"/>{}",
            first.mathml, second.mathml
        ),
        text: format!("{}, {}", first.text, second.text),
        ..first.clone()
    }
}

/// a + b.
pub fn plus(parts: &[Math]) -> Math {
    if parts.len() == 1 {
        parts[0].clone()
    } else {
        joined(parts, "+", true)
    }
}

/// a − b.
pub fn minus(first: &Math, second: &Math) -> Math {
    let mathml = format!("{}<mo>−</mo>{}", first.mathml, second.bracketed_mathml());
    Math::new(mathml, format!("{} − {}", first.text, second.bracketed()), true)
}

/// −a.
pub fn negative(part: &Math) -> Math {
    Math::new(
        format!("<mo>−</mo>{}", part.bracketed_mathml()),
        format!("−{}", part.bracketed()),
        true,
    )
}

/// a·b.
pub fn times(parts: &[Math]) -> Math {
    let mathml: Vec<String> = parts.iter().map(Math::bracketed_mathml).collect();
    let text: Vec<String> = parts.iter().map(Math::bracketed).collect();
    Math::new(mathml.join("<mo>·</mo>"), text.join("·"), false)
}

/// a/b.
pub fn over(first: &Math, second: &Math) -> Math {
    // In one line, a fraction above or below the stroke needs brackets, and so does a product below it.
    let above = if first.text.contains('/') {
        format!("({})", first.text)
    } else {
        first.bracketed()
    };
    let below = second.text.contains(['·', '/']);
    let below = if below {
        format!("({})", second.text)
    } else {
        second.bracketed()
    };
    Math::new(
        format!(
            "<mfrac><mrow>{}</mrow><mrow>{}</mrow></mfrac>",
            first.mathml, second.mathml
        ),
        format!("{above}/{below}"),
        false,
    )
}

/// a to the power of a number; 1 is left out.
pub fn power(base: &Math, exponent: f64) -> Math {
    if exponent == 1.0 {
        return base.clone();
    }
    let written = plain(&six(exponent));
    let base_text = if base.text.contains('·') || base.text.contains('/') {
        format!("({})", base.text)
    } else {
        base.bracketed()
    };
    let simple = written.chars().all(|letter| letter.is_ascii_digit());
    let raised = if simple {
        format!("^{written}")
    } else {
        format!("^({written})")
    };
    let text = if exponent == 2.0 {
        format!("{base_text}²")
    } else {
        format!("{base_text}{raised}")
    };
    let mathml = format!(
        "<msup><mrow>{}</mrow><mn>{written}</mn></msup>",
        base.bracketed_mathml()
    );
    Math::new(mathml, text, false)
}

/// √a.
pub fn root(part: &Math) -> Math {
    let simple = part.text.chars().all(char::is_alphanumeric);
    let text = if simple {
        format!("√{}", part.text)
    } else {
        format!("√({})", part.text)
    };
    Math::new(format!("<msqrt>{}</msqrt>", part.mathml), text, false)
}

/// A function of one argument, by its name.
pub fn function(name: &str, argument: &Math) -> Math {
    // A name of several letters is upright, as the browser would set it too; a style sheet cannot count letters.
    let upright = if name.len() > 1 {
        " mathvariant=\"normal\""
    } else {
        ""
    };
    let mathml = format!(
        "<mi{upright}>{name}</mi><mo>&#x2061;</mo><mo>(</mo>{}<mo>)</mo>",
        argument.mathml
    );
    Math::new(mathml, format!("{name}({})", argument.text), false)
}

/// ∫ of something from below to above, over a letter.
pub fn integral(below: &Math, above: &Math, of: &Math, over: &str) -> Math {
    let mathml = format!(
        "<msubsup><mo>∫</mo><mrow>{}</mrow><mrow>{}</mrow></msubsup>{}<mi>d</mi><mi>{over}</mi>",
        below.mathml,
        above.mathml,
        of.bracketed_mathml()
    );
    Math::new(
        mathml,
        format!("∫({} to {}) {} d{over}", below.text, above.text, of.bracketed()),
        false,
    )
}

/// d-something over dt.
pub fn derivative(name: &str) -> Math {
    let mathml =
        format!("<mfrac><mrow><mi>d</mi><mi>{name}</mi></mrow><mrow><mi>d</mi><mi>t</mi></mrow></mfrac>");
    Math::new(mathml, format!("d{name}/dt"), false)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_ways_of_writing_agree() {
        let square = power(&marked("x", "0"), 2.0);
        let formula = equal(&[letter("m"), times(&[letter("b"), minus(&square, &number(4.0))])]);
        assert_eq!(formula.text, "m = b·(x₀² − 4)");
        assert!(
            formula
                .to_mathml()
                .starts_with("<math><mrow><mi>m</mi><mo>=</mo><mi>b</mi><mo>·</mo><mo>(</mo><msup>")
        );
        assert_eq!(
            over(&letter("a"), &times(&[letter("b"), letter("c")])).text,
            "a/(b·c)"
        );
        assert_eq!(root(&over(&letter("a"), &letter("b"))).text, "√(a/b)");
        assert_eq!(number(1.5e-9).text, "1.5 × 10⁻⁹");
        assert!(number(1.5e-9).mathml.ends_with("<mn>−9</mn></msup>"));
        assert_eq!(power(&letter("x"), -0.5).text, "x^(−0.5)");
    }

    #[test]
    fn a_comma_keeps_off_a_bracket() {
        let faded = function("exp", &over(&letter("t"), &number(2.0)));
        let comma = |first: &Math| {
            let mathml = beside(first, &letter("y")).mathml;
            let from = mathml.rfind("<mo").expect("a comma");
            mathml[from..].split_once("</mo>").expect("its end").0.to_owned()
        };
        assert_eq!(comma(&letter("x")), "<mo>,");
        assert_eq!(comma(&faded), "<mo lspace=\"0.2em\">,");
    }
}
