//! Data directories: copies, damage and the way back, and directories that may not be written or read.

use std::fs;
use std::os::unix::fs::{MetadataExt, PermissionsExt};
use std::os::unix::process::CommandExt;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

use serde_json::Value;

use crate::program::{folder, json, program, refused, run, stdout};
use crate::server::Server;

/// The ranking of the one job, line by line.
fn ranking(folder: &Path, data: &str) -> (String, String) {
    let jobs = json(folder, &["jobs", "--data", data, "--json"]);
    let job = jobs[0]["job"].as_str().expect("an id").to_owned();
    let rank = ["rank", &job, "--data", data, "--json", "--limit", "0"];
    (stdout(folder, &rank), job)
}

fn code(output: &Output) -> Option<i32> {
    output.status.code()
}

/// The one file of a part of a data directory.
fn only_file(dir: &Path) -> PathBuf {
    let mut files = fs::read_dir(dir).expect("is there");
    let file = files.next().expect("a file").expect("an entry").path();
    assert!(files.next().is_none());
    file
}

#[test]
fn what_was_backed_up_comes_back() {
    let folder = folder();
    let folder = folder.path();
    stdout(folder, &["screen", "campaign.toml", "--data", "data"]);
    let (before, job) = ranking(folder, "data");
    let plan = ["plan", &job, "--data", "data", "--wells", "24", "--json"];
    let plan = json(folder, &plan);

    let copied = json(
        folder,
        &["backup", "--data", "data", "--to", "copy", "--json"],
    );
    assert_eq!(
        (&copied["jobs"], &copied["plans"]),
        (&Value::from(1), &Value::from(1))
    );
    assert_eq!(copied["cells"], 16);
    assert_eq!(
        ranking(folder, "copy").0,
        before,
        "the copy is a directory of its own"
    );
    let again = refused(folder, &["backup", "--data", "data", "--to", "copy"]);
    assert_eq!(again.0, Some(2), "{}", again.1);
    assert!(again.1.contains("`copy` is not empty"), "{}", again.1);

    fs::rename(folder.join("data"), folder.join("lost")).expect("is moved");
    let restored = ["restore", "--from", "copy", "--data", "data"];
    assert!(stdout(folder, &restored).contains("nothing is wrong"));
    assert_eq!(ranking(folder, "data").0, before);
    let kept = plan["id"].as_str().expect("an id");
    let shown = ["plan", "--kept", kept, "--data", "data", "--json"];
    assert_eq!(json(folder, &shown), plan);
    let (status, told) = refused(folder, &restored);
    assert_eq!(status, Some(2), "{told}");

    let jobs_only = [
        "backup",
        "--data",
        "data",
        "--to",
        "jobs-only",
        "--without-scores",
    ];
    assert!(stdout(folder, &jobs_only).contains("0 blocks"));
    assert_eq!(ranking(folder, "jobs-only").0, "");
    stdout(folder, &["watch", &job, "--data", "jobs-only"]);
    assert_eq!(
        ranking(folder, "jobs-only").0,
        before,
        "screened again, to the last digit"
    );
}

#[test]
fn a_damaged_directory_is_looked_at_mended_and_screened_again() {
    let folder = folder();
    let folder = folder.path();
    stdout(folder, &["screen", "campaign.toml"]);
    let data = folder.join("enolattice-data");
    let (before, job) = ranking(folder, "enolattice-data");
    assert!(stdout(folder, &["mend", "--look"]).contains("nothing is wrong"));
    assert!(stdout(folder, &["mend"]).contains("nothing is wrong"));

    let log = data.join("db/db");
    let bytes = fs::read(&log).expect("reads");
    fs::write(&log, vec![0x5a; bytes.len()]).expect("is written");
    fs::write(data.join("journal/06f3k8a5zr0q2.unfinished"), "{").expect("is written");
    let looked = run(folder, &["mend", "--look", "--json"]);
    assert_eq!(code(&looked), Some(1));
    let looked: Value = serde_json::from_slice(&looked.stdout).expect("JSON");
    assert_eq!(
        (&looked["sound"], &looked["changed"]),
        (&false.into(), &false.into())
    );
    assert_eq!(looked["queued_again"][0], job.as_str());
    assert_eq!(looked["leftovers"].as_array().map(Vec::len), Some(1));
    assert!(!data.join("db/db").metadata().expect("is there").is_dir());
    assert_eq!(
        looked["set_aside"],
        Value::Array(Vec::new()),
        "nothing was changed"
    );

    let mended = json(folder, &["mend", "--json"]);
    assert_eq!(mended["changed"], true);
    assert_eq!(mended["sentences"].as_array().map(Vec::len), Some(2));
    assert_eq!(mended["queued_again"], looked["queued_again"]);
    let aside = mended["set_aside"][0]["path"].as_str().expect("a path");
    assert!(folder.join(aside).join("db").exists());
    assert!(mended["set_aside"][0]["bytes"].as_u64() >= Some(bytes.len() as u64));
    let page = stdout(folder, &["mend"]);
    assert!(
        page.contains("nothing is wrong") && page.contains(aside),
        "{page}"
    );
    stdout(folder, &["watch", &job]);
    assert_eq!(ranking(folder, "enolattice-data").0, before);
}

#[test]
fn a_record_that_cannot_be_read_needs_somebody() {
    let folder = folder();
    let folder = folder.path();
    stdout(folder, &["screen", "campaign.toml"]);
    let (before, _) = ranking(folder, "enolattice-data");
    let record = only_file(&folder.join("enolattice-data/journal"));
    let sound = fs::read(&record).expect("reads");
    fs::write(&record, &sound[..sound.len() - 2]).expect("is written");
    for arguments in [&["mend"][..], &["mend", "--look"]] {
        let output = run(folder, arguments);
        assert_eq!(code(&output), Some(1));
        let page = String::from_utf8(output.stdout).expect("UTF-8");
        let name = record.file_name().expect("a name").to_string_lossy();
        assert!(page.contains(&*name), "{page}");
        assert!(page.contains("1 block of scores of jobs"), "{page}");
    }
    let left_out = run(folder, &["backup", "--to", "copy", "--without-scores"]);
    assert_eq!(code(&left_out), Some(1), "a copy with a gap says so");
    fs::write(&record, sound).expect("is put back");
    stdout(folder, &["mend"]);
    assert_eq!(ranking(folder, "enolattice-data").0, before);
}

#[test]
fn a_directory_in_use_gives_its_jobs_and_nothing_else() {
    let folder = folder();
    let folder = folder.path();
    let server = Server::start(folder);
    let submit = ["submit", "campaign.toml", "--server", &server.url];
    let job = stdout(folder, &submit).trim().to_owned();
    for arguments in [
        &["mend", "--data", "served"][..],
        &["mend", "--data", "served", "--look"],
        &["backup", "--data", "served", "--to", "copy"],
        &["restore", "--from", "served", "--data", "other"],
        &["serve", "--data", "served", "--listen", "127.0.0.1:0"],
        &["jobs", "--data", "served"],
    ] {
        let (status, told) = refused(folder, arguments);
        assert_eq!(status, Some(3), "{arguments:?}: {told}");
        assert!(told.contains("in use by another process"), "{told}");
    }
    assert!(!folder.join("copy").exists() && !folder.join("other").exists());
    let jobs_only = [
        "backup",
        "--data",
        "served",
        "--to",
        "copy",
        "--without-scores",
        "--json",
    ];
    assert_eq!(json(folder, &jobs_only)["jobs"], 1);
    let listed = json(folder, &["jobs", "--server", &server.url, "--json"]);
    assert_eq!(listed[0]["job"], job.as_str(), "the server goes on");
    drop(server);
    assert_eq!(ranking(folder, "copy").1, job);
}

#[test]
fn there_must_be_a_data_directory() {
    let folder = folder();
    let folder = folder.path();
    for arguments in [
        &["mend", "--data", "absent"][..],
        &["mend", "--data", ".", "--look"],
        &["backup", "--data", "absent", "--to", "copy"],
        &["backup", "--data", ".", "--to", "copy", "--without-scores"],
        &["restore", "--from", "absent", "--data", "copy"],
    ] {
        let (status, told) = refused(folder, arguments);
        assert_eq!(status, Some(2), "{arguments:?}: {told}");
        assert!(told.contains("there is no store in"), "{told}");
    }
    assert!(!folder.join("absent").exists() && !folder.join("copy").exists());
}

/// Runs the program as somebody whom permissions bind: nobody, where these tests are run by root.
fn as_nobody(folder: &Path, arguments: &[&str]) -> Output {
    const NOBODY: u32 = 65534;
    let mut command = program(folder, arguments);
    if folder.metadata().expect("is there").uid() == 0 {
        // The program may lie where nobody may go.
        let reachable = folder.join("enolattice");
        let built = env!("CARGO_BIN_EXE_enolattice");
        if !reachable.exists() && fs::hard_link(built, &reachable).is_err() {
            fs::copy(built, &reachable).expect("is copied");
        }
        command = Command::new(&reachable);
        command.current_dir(folder).args(arguments);
        command.uid(NOBODY).gid(NOBODY);
    }
    let output = command.stdin(Stdio::null()).output();
    output.expect("runs")
}

/// Gives everything below a path these permissions: directories `x` where files have `r`.
fn permit(path: &Path, directories: u32, files: u32) {
    let mode = |mode| fs::Permissions::from_mode(mode);
    if path.is_dir() {
        fs::set_permissions(path, mode(0o700)).expect("is ours");
        for entry in fs::read_dir(path).expect("is read") {
            permit(&entry.expect("an entry").path(), directories, files);
        }
        fs::set_permissions(path, mode(directories)).expect("is ours");
    } else {
        fs::set_permissions(path, mode(files)).expect("is ours");
    }
}

#[test]
fn a_directory_that_may_not_be_written_or_read_is_told_by_name() {
    let folder = folder();
    let folder = folder.path();
    stdout(folder, &["screen", "campaign.toml", "--data", "data"]);
    let (before, job) = ranking(folder, "data");
    fs::set_permissions(folder, fs::Permissions::from_mode(0o755)).expect("is ours");
    fs::create_dir(folder.join("out")).expect("is made");
    fs::set_permissions(folder.join("out"), fs::Permissions::from_mode(0o777)).expect("is ours");
    let data = folder.join("data");
    let told = |arguments: &[&str]| {
        let output = as_nobody(folder, arguments);
        let told = String::from_utf8(output.stderr).expect("UTF-8");
        assert_eq!(output.status.code(), Some(3), "{arguments:?}: {told}");
        assert!(
            told.contains("data") && told.contains("ermission denied"),
            "{told}"
        );
        assert!(told.contains("check that"), "a remedy: {told}");
    };
    let open = [
        &["jobs", "--data", "data"][..],
        &["rank", &job, "--data", "data"],
        &["serve", "--data", "data", "--listen", "127.0.0.1:0"],
        &["backup", "--data", "data", "--to", "out/all"],
        &["mend", "--data", "data"],
    ];
    permit(&data, 0o555, 0o444);
    open.iter().for_each(|arguments| told(arguments));
    let looked = as_nobody(folder, &["mend", "--data", "data", "--look"]);
    let page = String::from_utf8(looked.stdout.clone()).expect("UTF-8");
    assert!(
        page.contains("nothing is wrong"),
        "what may be read may be looked at: {page}"
    );
    let jobs_only = [
        "backup",
        "--data",
        "data",
        "--to",
        "out/jobs",
        "--without-scores",
    ];
    assert_eq!(as_nobody(folder, &jobs_only).status.code(), Some(0));
    permit(&data, 0o000, 0o000);
    open.iter().for_each(|arguments| told(arguments));
    told(&["mend", "--data", "data", "--look"]);
    permit(&data, 0o700, 0o600);
    assert_eq!(ranking(folder, "data").0, before);
    assert!(!folder.join("out/all").exists());
}
