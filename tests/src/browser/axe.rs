//! A second opinion on whether everyone can use the page: axe-core, which `tests/run` fetches into `tests/node_modules`.

use serde_json::Value;

use super::Browser;
use crate::tables::project;

/// Every rule that axe-core has switched on by itself, and the size of what is pressed, which it has not.
const RUN: &str = "
    const done = arguments[arguments.length - 1];
    axe.run(document, {rules: {'target-size': {enabled: true}}, resultTypes: ['violations']}).then(
      (found) => done({rules: found.passes.length, violations: found.violations.map((rule) =>
        rule.id + ' (' + rule.impact + '): ' + rule.help + rule.nodes.map((node) =>
          '\\n    ' + node.target.join(' ') + ': ' + node.failureSummary.replace(/\\s+/g, ' ')).join(''))}),
      (error) => done({error: String(error)}));";

impl Browser {
    /// What axe-core finds in the page as it stands, each with `what` before it.
    ///
    /// # Panics
    /// Where axe-core is not fetched, or finds nothing that it can look at.
    #[track_caller]
    pub fn axe(&self, what: &str) -> Vec<String> {
        self.script(&source(), vec![]);
        let found = self.run("axe-core", self.client().execute_async(RUN, vec![]));
        assert_eq!(found["error"], Value::Null, "{what}");
        // A page that is blank has nothing wrong with it either.
        assert!(
            found["rules"].as_u64().is_some_and(|rules| rules >= 20),
            "{what}: only {} rules found anything to look at",
            found["rules"]
        );
        let violations = found["violations"].as_array().expect("a list");
        let lines = violations.iter().filter_map(Value::as_str);
        lines.map(|line| format!("{what}: {line}")).collect()
    }
}

fn source() -> String {
    let path = project().join("tests/node_modules/axe-core/axe.min.js");
    std::fs::read_to_string(&path)
        .unwrap_or_else(|why| panic!("{}: {why}; npm ci --prefix tests fetches it", path.display()))
}
