//! `--help`, completions and the manual page.

use insta::assert_snapshot;

use super::project::run;

#[test]
fn help_lists_the_commands() {
    assert_snapshot!(run(&["--help"]).shown(), @r"
    exit: 0
    --- stdout
    Turns one YAML project file into a calculation package for beams and frames that a checker can
    review.

    A package supports and does not replace the judgement of a licensed engineer; local codes and
    national annexes govern.

    Usage: spanfolio [OPTIONS] <COMMAND>

    Commands:
      start        Set up a new project folder from a small working example
      solve        Solve a project and print what governs; writes nothing
      issue        Write the calculation package into the project's `package` folder
      compare      Say what changed between two revisions of a project
      audit        Hold committed packages against their projects, list what is open; for CI
      try          Try the sections of a family in place of one section, lightest first
      catalogue    Find sections, materials, check sheets and combination rules, print their properties
                   and source
      schema       Print the JSON Schema of the project file, for editors
      completions  Print shell completions
      man          Print the manual page
      help         Print this message or the help of the given subcommand(s)

    Options:
          --jobs <N>
              Threads to use at most; the result does not depend on it

      -h, --help
              Print help (see a summary with '-h')

      -V, --version
              Print version

    Exit status: 0 done; 1 could not (writing failed, self-check out of tolerance; nothing written); 2
    the command line or the project is wrong; 3 a check is not satisfied, or deferred without being
    named in `basis.deferred` (`solve`, `audit`), or no section satisfies (`try`), or an outcome
    worsened (`compare --exit-status`); 4 a committed package is out of date (`audit`).
    ");
}

#[test]
fn help_of_solve() {
    assert_snapshot!(run(&["solve", "--help"]).shown(), @r"
    exit: 0
    --- stdout
    Solve a project and print what governs; writes nothing

    Usage: spanfolio solve [OPTIONS] <PROJECT>

    Arguments:
      <PROJECT>  Folder of the project, or its `project.yaml`

    Options:
          --jobs <N>              Threads to use at most; the result does not depend on it
          --json                  Print the whole record as JSON
          --at <MEMBER POSITION>  Print every effect at a place of a member, in every case and
                                  combination
      -h, --help                  Print help
      -V, --version               Print version
    ");
}

#[test]
fn help_of_issue() {
    assert_snapshot!(run(&["issue", "--help"]).shown(), @r"
    exit: 0
    --- stdout
    Write the calculation package into the project's `package` folder

    Usage: spanfolio issue [OPTIONS] <PROJECT>

    Arguments:
      <PROJECT>  Folder of the project, or its `project.yaml`

    Options:
          --against <REVISION>  Mark what changed since a git revision, and add a chapter that lists it
          --jobs <N>            Threads to use at most; the result does not depend on it
      -h, --help                Print help
      -V, --version             Print version
    ");
}

#[test]
fn help_of_start() {
    assert_snapshot!(run(&["start", "--help"]).shown(), @r"
    exit: 0
    --- stdout
    Set up a new project folder from a small working example

    Usage: spanfolio start [OPTIONS] <FOLDER>

    Arguments:
      <FOLDER>
              Folder to make; it must not exist or be empty

    Options:
          --jobs <N>
              Threads to use at most; the result does not depend on it

          --kind <KIND>
              Which example to begin with

              Possible values:
              - simple-beam:     One span between two supports
              - continuous-beam: Several spans over supports
              - plane-frame:     Columns and a beam in one plane
              - space-frame:     Columns and beams in space
              - us-units:        One span in US customary units
              
              [default: simple-beam]

      -h, --help
              Print help (see a summary with '-h')

      -V, --version
              Print version
    ");
}

#[test]
fn help_of_try() {
    assert_snapshot!(run(&["try", "--help"]).shown(), @r"
    exit: 0
    --- stdout
    Try the sections of a family in place of one section, lightest first

    Usage: spanfolio try [OPTIONS] --section <NAME> <PROJECT>

    Arguments:
      <PROJECT>  Folder of the project, or its `project.yaml`

    Options:
          --jobs <N>               Threads to use at most; the result does not depend on it
          --section <NAME>         Name of the section in the project
          --family <FAMILY>        Family of the catalogue; left out: that of the section as written
          --adopt [<DESIGNATION>]  Write a designation into `project.yaml`: this one, or the lightest
                                   that satisfies every check
          --all                    Print those that do not satisfy as well
          --json                   Print JSON, all values in SI base units
      -h, --help                   Print help
      -V, --version                Print version
    ");
}

#[test]
fn help_of_catalogue() {
    assert_snapshot!(run(&["catalogue", "--help"]).shown(), @r"
    exit: 0
    --- stdout
    Find sections, materials, check sheets and combination rules, print their properties and source

    Usage: spanfolio catalogue [OPTIONS] [WORDS]...

    Arguments:
      [WORDS]...  A name (`IPE 300`, `S275`, `bending stress`), a family (`IPE`), `checks`, `rules` or
                  words to find; none lists what there is

    Options:
          --jobs <N>            Threads to use at most; the result does not depend on it
          --units <UNITS>       Units to print in [default: si] [possible values: si, us]
          --thickness <LENGTH>  Thickness that chooses the strengths of a material, e.g. `50 mm`
          --json                Print JSON, all values in SI base units
      -h, --help                Print help
      -V, --version             Print version
    ");
}

#[test]
fn an_unknown_command_is_the_command_lines_fault() {
    assert_eq!(run(&["analyse"]).status, 2);
}

#[test]
fn completions_know_the_commands() {
    let bash = run(&["completions", "bash"]);
    assert_eq!(bash.status, 0);
    assert!(bash.out.contains("catalogue"));
}

#[test]
fn the_manual_page_is_a_manual_page() {
    let man = run(&["man"]);
    assert_eq!(man.status, 0);
    assert!(man.out.contains(".TH spanfolio"));
}

#[test]
fn the_schema_is_json() {
    let schema = run(&["schema"]);
    assert_eq!(schema.status, 0);
    let read: serde_json::Value = serde_json::from_str(&schema.out).expect("JSON");
    assert_eq!(read["$schema"], "https://json-schema.org/draft/2020-12/schema");
}
