//! An audit as JUnit XML: a suite for each project, a case for its package and for each check.

use quick_junit::{NonSuccessKind, TestCase, TestCaseStatus, TestSuite};

use super::{Audited, CheckOutcome, PackageState, Problem, Report};

/// What a run of suites is called.
const NAME: &str = "spanfolio audit";

impl Report {
    /// The report as JUnit XML, without times.
    ///
    /// # Panics
    /// Never: writing to memory does not fail.
    #[must_use]
    pub fn to_junit(&self) -> String {
        let mut report = quick_junit::Report::new(NAME);
        if !self.problems.is_empty() {
            let mut suite = TestSuite::new(NAME);
            suite.add_test_case(case(NAME, "projects are found", solved(&self.problems)));
            report.add_test_suite(suite);
        }
        report.add_test_suites(self.projects.iter().map(suite));
        report.to_string().expect("memory can be written")
    }
}

fn suite(project: &Audited) -> TestSuite {
    let name = project.project.as_str();
    let mut suite = TestSuite::new(name);
    suite.add_test_case(case(name, "project is read and solved", solved(&project.problems)));
    suite.add_test_case(package(name, project.package.as_ref()));
    for check in &project.checks {
        suite.add_test_case(case(name, &check.name(), outcome(check)));
    }
    for assumption in &project.assumptions {
        suite.add_property(("assumption to confirm", assumption.words().as_str()));
    }
    for deferral in &project.deferrals {
        suite.add_property(("deferral", deferral.words().as_str()));
    }
    suite
}

fn case(class: &str, name: &str, status: TestCaseStatus) -> TestCase {
    let mut case = TestCase::new(name, status);
    case.set_classname(class);
    case
}

fn solved(problems: &[Problem]) -> TestCaseStatus {
    let errors: Vec<&Problem> =
        problems.iter().filter(|problem| problem.severity == "error").collect();
    let Some(first) = errors.first() else { return TestCaseStatus::success() };
    let lines: Vec<String> = errors.iter().map(|problem| problem.words()).collect();
    told(TestCaseStatus::non_success(NonSuccessKind::Error), first.code, &first.message, &lines)
}

fn package(class: &str, package: Option<&PackageState>) -> TestCase {
    let name = "package is up to date";
    let Some(package) = package else {
        let mut status = TestCaseStatus::skipped();
        status.set_message("the project could not be solved");
        return case(class, name, status);
    };
    let status = match package.reason {
        None => TestCaseStatus::success(),
        Some(reason) => {
            let files = package.files.iter().map(super::FileDifference::words);
            let lines: Vec<String> = package.details.iter().cloned().chain(files).collect();
            let failure = TestCaseStatus::non_success(NonSuccessKind::Failure);
            told(failure, reason.slug(), &package.words, &lines)
        }
    };
    let mut case = case(class, name, status);
    if !package.notes.is_empty() {
        case.set_system_out(package.notes.join("\n"));
    }
    case
}

fn outcome(check: &CheckOutcome) -> TestCaseStatus {
    let place = check.place.as_ref().map(|place| format!("{}:{}", place.file, place.line));
    let lines: Vec<String> = std::iter::once(check.title.clone()).chain(place).collect();
    match check.outcome.as_str() {
        "satisfied" => TestCaseStatus::success(),
        "deferred" if check.disclosed => {
            told(TestCaseStatus::skipped(), "deferred", &check.words(), &lines)
        }
        _ => {
            let failure = TestCaseStatus::non_success(NonSuccessKind::Failure);
            let kind = if check.outcome == "deferred" { "not-disclosed" } else { "not-satisfied" };
            told(failure, kind, &check.words(), &lines)
        }
    }
}

fn told(mut status: TestCaseStatus, kind: &str, message: &str, lines: &[String]) -> TestCaseStatus {
    status.set_type(kind).set_message(message);
    if !lines.is_empty() {
        status.set_description(lines.join("\n"));
    }
    status
}
