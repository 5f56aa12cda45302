//! Twins: two site files that differ in one stated value, one just passing and one just failing.

use ampwright::site::{Finding, Report, Severity, inspect, read};

use crate::document::Document;

/// A pair of site files about one edge.
pub struct Pair {
    /// Rule of the design that the edge belongs to.
    pub rule: &'static str,
    /// What the edge is.
    pub edge: &'static str,
    /// Kind of finding that the failing twin has and the passing one has not.
    pub slug: &'static str,
    pub severity: Severity,
    /// The file, with `?` where the twins differ.
    pub site: Document,
    pub passing: &'static str,
    pub failing: &'static str,
    /// Other faults the failing twin cannot but have too.
    pub also: &'static [&'static str],
}

impl Pair {
    /// A pair without other faults.
    pub fn of(
        severity: Severity,
        (rule, slug): (&'static str, &'static str),
        edge: &'static str,
        site: Document,
        (passing, failing): (&'static str, &'static str),
    ) -> Self {
        Self { rule, edge, slug, severity, site, passing, failing, also: &[] }
    }

    /// The rule set; the passing twin's where the twins differ in it.
    pub fn set(&self) -> &str {
        if self.site.rules() == "?" { self.passing } else { self.site.rules() }
    }

    pub fn text(&self, value: &str) -> String {
        let text = self.site.to_string();
        assert_eq!(text.matches('?').count(), 1, "{}: twins differ in one place", self.edge);
        text.replace('?', value)
    }

    fn report(&self, value: &str) -> Result<Report, String> {
        let text = self.text(value);
        let site = read(&text).map_err(|problems| problems.to_string())?;
        inspect(&site).map_err(|problems| problems.to_string())
    }

    /// What is wrong with the pair; empty where both twins come out right.
    pub fn faults(&self) -> Vec<String> {
        let mut faults = Vec::new();
        let mut fault = |twin: &str, what: String| {
            faults.push(format!("{} {} ({}), {twin}: {what}", self.rule, self.edge, self.site.rules()));
        };
        let (passing, failing) = match (self.report(self.passing), self.report(self.failing)) {
            (Ok(passing), Ok(failing)) => (passing, failing),
            (Err(refused), _) | (_, Err(refused)) => {
                fault("refused", refused);
                return faults;
            }
        };
        for finding in &passing.findings {
            let missing = not_made(self.slug);
            let not_made = !missing.is_empty() && finding.slug.starts_with(missing);
            if finding.slug == self.slug || not_made || is_failure(finding) {
                fault("passing", finding.to_string());
            }
        }
        let found = |f: &&Finding| f.slug == self.slug;
        match failing.findings.iter().find(found) {
            None => fault("failing", format!("no {}", self.slug)),
            Some(finding) if finding.severity != self.severity => {
                fault("failing", format!("{}: {finding}", finding.severity.word()));
            }
            Some(_) => {}
        }
        // Nothing else may stand in for it: the failing twin fails here and nowhere else.
        for finding in failing.findings.iter().filter(|f| is_failure(f)) {
            if finding.slug != self.slug && !self.also.contains(&finding.slug) {
                fault("failing", format!("too: {finding}"));
            }
        }
        for slug in self.also {
            if !failing.findings.iter().any(|f| f.slug == *slug) {
                fault("failing", format!("not found too: {slug}"));
            }
        }
        faults
    }
}

/// Beginning of the finding that stands where the check of a slug could not be made: the passing twin's check is made.
fn not_made(slug: &str) -> &'static str {
    match slug {
        "conductor-refused" => "conductor-not-checked",
        "conductor-below-least-size" => "least-size-not-checked",
        "terminal-column-exceeded" => "terminal-column-not-checked",
        "ampacity-exceeded" => "ampacity-not-checked",
        "device-below-load" => "device-load-not-checked",
        "device-above-ampacity" => "device-against-ampacity-not-checked",
        "device-opens-late" => "opening-current-not-checked",
        "drop-exceeded" => "drop-not-checked",
        "voltage-too-low-at-load" => "least-voltage-not-stated",
        "voltage-too-high-at-load" => "greatest-voltage-not-stated",
        "breaking-capacity-too-low" => "breaking-capacity-not-checked",
        "least-fault-too-small" => "least-fault-not-checked",
        "withstand-exceeded" => "withstand-not-checked",
        "device-not-for-this-supply" => "device-supply-not-checked",
        "terminal-range" => "termination-not-checked",
        "device-too-far-from-source" => "device-distance-not",
        "device-trips-at-start" => "start-against-device-not-checked",
        "start-voltage-too-low" => "start-voltage-not-checked",
        "discharge-above-limit" => "discharge-limit-not-stated",
        "part-below-device" => "part-rating-not-stated",
        "part-voltage-too-low" | "part-not-for-dc" => "part-voltage-not-stated",
        "busbar-below-sum" => "busbar-rating-not-stated",
        "lug-too-small" | "lug-too-large" => "lug-not-stated",
        "array-voltage-too-high"
        | "array-voltage-above-part"
        | "array-voltage-too-low"
        | "array-current-above-controller"
        | "array-yield-cut"
        | "string-device-missing"
        | "string-device-wrong"
        | "clamp-loses-yield" => "array-not-checked",
        "isolator-not-load-break" | "isolator-current-too-low" => "isolator-not-stated",
        "array-without-monitoring" => "monitoring-not-checked",
        "charge-above-limit" | "charge-above-ceiling" | "charge-rate-low" => "charger-limit-not-stated",
        "charge-above-limit-in-cold" => "charge-limit-in-cold-not-stated",
        "set-point-low" | "set-point-high" | "highest-below-charging" => "set-points-not-stated",
        "energy-short" => "energy-not-checked",
        "bank-in-living-space" | "bank-in-engine-space" => "bank-space-not-stated",
        "compensation-missing" | "compensation-not-for-chemistry" => "compensation-not-stated",
        "load-dump" => "load-dump-not-stated",
        "array-reaches-loads" => "array-reaches-loads-not-checked",
        "bank-too-small" => "capacity-not-checked",
        "disconnect-too-low" => "disconnect-not-checked",
        "reconnect-too-near" => "reconnect-not-stated",
        "too-many-in-series" => "series-not-checked",
        "strings-not-on-busbar" | "strings-share-unequally" | "string-device-too-small" => {
            "strings-not-checked"
        }
        "ventilation-too-small" => "ventilation-not-stated",
        "standing-share-high" => "standing-loads-not-stated",
        "inverter-start-too-large" => "inverter-start-not-checked",
        "inverter-inrush" => "inrush-not-checked",
        "surge-protection-missing" => "surge-protection-not-stated",
        "bonding-too-thin" => "bonding-not-checked",
        "no-bond-point" | "several-bond-points" => "bond-points-not-stated",
        "touch-protection-missing" => "touch-protection",
        _ => "",
    }
}

fn is_failure(finding: &Finding) -> bool {
    matches!(finding.severity, Severity::Danger | Severity::Nonconforming)
}
