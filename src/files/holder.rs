use std::fmt;
use std::time::{Duration, SystemTime, UNIX_EPOCH};

use serde::{Deserialize, Serialize};

/// A holder is a running program that has a recipe open: whose, where, since when.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Holder {
    /// Name of the machine.
    pub host: String,
    /// Name of the person.
    pub user: String,
    /// Number of the process on that machine.
    pub pid: u32,
    /// Since when, s since 1970.
    pub since: u64,
    /// When the process started, as the system counts, so that a number used again is not mistaken for it; empty where unknown.
    #[serde(default)]
    started: String,
}

/// Whether a holder still runs.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Runs {
    /// It does.
    Yes,
    /// It does not.
    No,
    /// It is on another machine, so that we can't tell.
    Unknown,
}

impl Holder {
    /// This process, from now on.
    pub fn this_process(now: SystemTime) -> Self {
        let pid = std::process::id();
        let since = now.duration_since(UNIX_EPOCH).unwrap_or_default().as_secs();
        Self { host: host(), user: user(), pid, since, started: started(pid).unwrap_or_default() }
    }

    /// Since when.
    pub fn since(&self) -> SystemTime {
        UNIX_EPOCH + Duration::from_secs(self.since)
    }

    /// Whether it still runs.
    pub fn runs(&self) -> Runs {
        if self.host != host() {
            return Runs::Unknown;
        }
        let another = || !self.started.is_empty() && started(self.pid).is_some_and(|now| now != self.started);
        if is_alive(self.pid) && !another() { Runs::Yes } else { Runs::No }
    }
}

impl fmt::Display for Holder {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} on {} (process {})", self.user, self.host, self.pid)
    }
}

#[cfg(unix)]
fn host() -> String {
    rustix::system::uname().nodename().to_string_lossy().into_owned()
}

#[cfg(not(unix))]
fn host() -> String {
    std::env::var("COMPUTERNAME").unwrap_or_default()
}

#[cfg(unix)]
fn user() -> String {
    let named = ["USER", "LOGNAME"].into_iter().find_map(|name| std::env::var(name).ok().filter(|user| !user.is_empty()));
    named.unwrap_or_else(|| format!("user {}", rustix::process::getuid().as_raw()))
}

#[cfg(not(unix))]
fn user() -> String {
    std::env::var("USERNAME").unwrap_or_default()
}

/// A process that we may not signal is there all the same.
#[cfg(unix)]
fn is_alive(pid: u32) -> bool {
    let pid = i32::try_from(pid).ok().and_then(rustix::process::Pid::from_raw);
    pid.is_some_and(|pid| rustix::process::test_kill_process(pid) != Err(rustix::io::Errno::SRCH))
}

/// Where processes can't be looked up, a holder counts as running.
#[cfg(not(unix))]
fn is_alive(_pid: u32) -> bool {
    true
}

/// When a process started, in clock ticks since the machine did: field 22 of `/proc/PID/stat` (proc_pid_stat(5)).
fn started(pid: u32) -> Option<String> {
    let stat = std::fs::read_to_string(format!("/proc/{pid}/stat")).ok()?;
    // The second field is a name in brackets that may hold anything.
    let fields = &stat[stat.rfind(')')? + 1..];
    fields.split_whitespace().nth(19).map(str::to_owned)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn this_process_runs_and_one_that_ended_does_not() {
        let own = Holder::this_process(SystemTime::now());
        assert_eq!(own.runs(), Runs::Yes);
        assert_eq!(Holder { host: "elsewhere".to_owned(), ..own.clone() }.runs(), Runs::Unknown);
        if cfg!(target_os = "linux") {
            assert_eq!(Holder { started: "1".to_owned(), ..own.clone() }.runs(), Runs::No, "the number was used again");
        }
        let mut child = std::process::Command::new("true").spawn().expect("it starts");
        let pid = child.id();
        child.wait().expect("it ends");
        if cfg!(unix) {
            assert_eq!(Holder { pid, started: String::new(), ..own }.runs(), Runs::No);
        }
    }
}
