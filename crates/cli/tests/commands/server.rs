//! A server in a process of its own.

use std::io::{BufRead, BufReader};
use std::path::Path;
use std::process::{Child, Command, Stdio};

use crate::program::{folder, json, lines, program, refused, stdout};

/// A server that is killed with the test.
pub(crate) struct Server {
    child: Child,
    pub(crate) url: String,
}

impl Server {
    pub(crate) fn start(folder: &Path) -> Server {
        let mut child = program(
            folder,
            &["serve", "--listen", "127.0.0.1:0", "--data", "served"],
        )
        .stdout(Stdio::piped())
        .stderr(Stdio::null())
        .spawn()
        .expect("runs");
        let mut line = String::new();
        BufReader::new(child.stdout.as_mut().expect("piped"))
            .read_line(&mut line)
            .expect("a line");
        let address = line
            .trim()
            .strip_prefix("listening on ")
            .expect("the address");
        Server {
            url: format!("http://{address}"),
            child,
        }
    }
}

impl Drop for Server {
    fn drop(&mut self) {
        // It has ended already where the test stopped it.
        let _ = self.child.kill();
        let _ = self.child.wait();
    }
}

fn on_server<'a>(url: &'a str, arguments: &[&'a str]) -> Vec<&'a str> {
    [arguments, &["--server", url]].concat()
}

#[test]
fn a_server_answers_as_the_embedded_engine_does() {
    let folder = folder();
    let folder = folder.path();
    let mut server = Server::start(folder);
    let url = server.url.clone();
    let embedded = json(folder, &["screen", "campaign.toml", "--json"]);
    let served = json(
        folder,
        &on_server(&url, &["screen", "campaign.toml", "--json"]),
    );
    for part in ["top", "best_of_each_substrate", "cells_not_covered"] {
        assert_eq!(embedded[part], served[part], "{part}");
    }
    let (here, there) = (
        embedded["job"]["job"].as_str(),
        served["job"]["job"].as_str(),
    );
    let (here, there) = (here.expect("an id"), there.expect("an id"));
    let filter = [
        "--json",
        "--filter",
        "expected_yield > 0.01",
        "--order",
        "selectivity",
    ];
    let rank_here = stdout(folder, &[&["rank", here], filter.as_slice()].concat());
    let rank_there = stdout(
        folder,
        &on_server(&url, &[&["rank", there], filter.as_slice()].concat()),
    );
    assert_eq!(rank_here, rank_there);
    assert_eq!(
        stdout(folder, &["explain", here, "3"]),
        stdout(folder, &on_server(&url, &["explain", there, "3"]))
    );
    let given = [
        "explain",
        "--json",
        "--substrate",
        "CC(C)=O",
        "--base",
        "LDA",
        "--electrophile",
        "MeI",
        "--solvent",
        "THF",
        "--temperature-c",
        "-78",
        "--addition",
        "all together",
    ];
    assert_eq!(
        stdout(folder, &given),
        stdout(folder, &on_server(&url, &given))
    );
    for same in [
        vec!["sites", "--json", "CC(C)=O"],
        vec!["reagents", "--json"],
        vec!["reagents", "Me"],
    ] {
        assert_eq!(
            stdout(folder, &same),
            stdout(folder, &on_server(&url, &same)),
            "{same:?}"
        );
    }
    for wrong in [
        vec!["explain", there, "16"],
        vec!["rank", there, "--filter", "yield > 0.5"],
        vec!["explain", "nojob", "1"],
        vec!["sites", "C1CC"],
        vec![
            "explain",
            "--substrate",
            "CC(",
            "--base",
            "LDE",
            "--electrophile",
            "X",
            "--solvent",
            "THF",
            "--temperature-c",
            "25",
        ],
    ] {
        let embedded: Vec<&str> = wrong
            .iter()
            .map(|word| if *word == there { here } else { word })
            .collect();
        let (code, told) = refused(folder, &on_server(&url, &wrong));
        let (code_here, told_here) = refused(folder, &embedded);
        assert_eq!(
            (code, told.replace(there, here)),
            (code_here, told_here),
            "{wrong:?}"
        );
    }
    let (code, told) = refused(folder, &["jobs", "--data", "served"]);
    assert_eq!(code, Some(3), "the server has the directory: {told}");
    assert_eq!(
        json(folder, &on_server(&url, &["jobs", "--json"]))[0]["job"],
        there
    );

    let terminated = Command::new("kill")
        .args(["-TERM", &server.child.id().to_string()])
        .status();
    assert!(terminated.expect("kill runs").success());
    assert_eq!(server.child.wait().expect("ends").code(), Some(0));
    assert_eq!(
        json(folder, &["jobs", "--data", "served", "--json"])[0]["job"],
        there
    );
}

#[test]
fn the_log_of_a_service_can_be_read_by_programs() {
    let folder = folder();
    let mut child = program(
        folder.path(),
        &["serve", "--listen", "127.0.0.1:0", "--log-format", "json"],
    )
    .stdout(Stdio::piped())
    .stderr(Stdio::piped())
    .spawn()
    .expect("runs");
    let mut line = String::new();
    BufReader::new(child.stdout.as_mut().expect("piped"))
        .read_line(&mut line)
        .expect("a line");
    let terminated = Command::new("kill")
        .args(["-TERM", &child.id().to_string()])
        .status();
    assert!(terminated.expect("kill runs").success());
    let output = child.wait_with_output().expect("ends");
    assert_eq!(output.status.code(), Some(0));
    let log = lines(&String::from_utf8(output.stderr).expect("UTF-8"));
    assert!(
        log.iter().any(|entry| entry["message"] == "shutting down"),
        "{log:?}"
    );
}

#[test]
fn a_plan_is_kept_and_shown_again_here_and_there() {
    let folder = folder();
    let folder = folder.path();
    std::fs::write(
        folder.join("plan.toml"),
        "[plates]\nwells = 24\n[choice]\ndraws = 16\n[deck]\ninert = true\n",
    )
    .expect("written");
    let server = Server::start(folder);
    let here = json(folder, &["screen", "campaign.toml", "--json"]);
    let there = json(
        folder,
        &on_server(&server.url, &["screen", "campaign.toml", "--json"]),
    );
    let mut plans = Vec::new();
    for (screened, server) in [(here, None), (there, Some(server.url.as_str()))] {
        let asked = |arguments: &[&'static str]| match server {
            Some(url) => [arguments, &["--server", url]].concat(),
            None => arguments.to_vec(),
        };
        let job = screened["job"]["job"].as_str().expect("an id");
        let plan = ["plan", job, "--request", "plan.toml", "--json"];
        let mut made = json(folder, &[&plan[..], &asked(&[])[..]].concat());
        let listed = json(folder, &asked(&["plans", "--json"]));
        assert_eq!(listed.as_array().map(Vec::len), Some(1));
        assert_eq!(listed[0]["plan"], made["id"]);
        assert_eq!(listed[0]["job"], job);
        let id = made["id"].as_str().expect("an id").to_owned();
        let again = [&["plan", "--kept", &id, "--json"][..], &asked(&[])[..]].concat();
        assert_eq!(json(folder, &again), made);
        assert!(stdout(folder, &asked(&["plans"])).contains(&id));
        for stamp in ["id", "made_unix_ms", "job"] {
            made[stamp].take();
        }
        plans.push(made);
    }
    assert_eq!(plans[0], plans[1]);
}
