//! The real binary in a real pseudo-terminal: it starts, turns a knob, resizes, is stopped, continued and killed, and leaves
//! the terminal as it found it.

use portable_pty::{Child, CommandBuilder, MasterPty, PtySize, native_pty_system};
use std::io::{Read, Write};
use std::num::NonZero;
use std::process::Command;
use std::sync::mpsc::{Receiver, channel};
use std::time::{Duration, Instant};

/// How long a test waits for something that must happen before it gives up; nothing is measured by it.
const PATIENCE: Duration = Duration::from_secs(30);

struct Session {
    child: Box<dyn Child + Send + Sync>,
    master: Box<dyn MasterPty + Send>,
    writer: Box<dyn Write + Send>,
    output: Receiver<Vec<u8>>,
    screen: vt100::Parser,
    before: String,
}

fn cells(count: u16) -> NonZero<u16> {
    NonZero::new(count).expect("at least one cell")
}

fn size(cols: u16, rows: u16) -> PtySize {
    PtySize {
        rows,
        cols,
        pixel_width: 0,
        pixel_height: 0,
    }
}

impl Session {
    fn start(args: &[&str]) -> Self {
        let pair = native_pty_system()
            .openpty(size(80, 24))
            .expect("pseudo-terminal");
        let before = format!("{:?}", pair.master.get_termios());
        let mut command = CommandBuilder::new(env!("CARGO_BIN_EXE_stoop"));
        command.args(args);
        command.env("TERM", "xterm-256color");
        command.env_remove("NO_COLOR");
        let child = pair
            .slave
            .spawn_command(command)
            .expect("the binary starts");
        drop(pair.slave);
        let mut reader = pair.master.try_clone_reader().expect("reader");
        let writer = pair.master.take_writer().expect("writer");
        let (sender, output) = channel();
        std::thread::spawn(move || {
            let mut buffer = [0; 8192];
            while let Ok(count) = reader.read(&mut buffer) {
                if count == 0 || sender.send(buffer[..count].to_vec()).is_err() {
                    break;
                }
            }
        });
        Self {
            child,
            master: pair.master,
            writer,
            output,
            screen: vt100::Parser::new(cells(24), cells(80), 0),
            before,
        }
    }

    fn send(&mut self, keys: &str) {
        self.writer
            .write_all(keys.as_bytes())
            .expect("keys are taken");
        self.writer.flush().expect("keys are taken");
    }

    /// Reads until the screen satisfies a condition.
    fn until(&mut self, what: &str, condition: impl Fn(&vt100::Screen) -> bool) {
        let deadline = Instant::now() + PATIENCE;
        while !condition(self.screen.screen()) {
            let left = deadline.saturating_duration_since(Instant::now());
            match self.output.recv_timeout(left) {
                Ok(bytes) => self.screen.process(&bytes),
                Err(_) => panic!("waited for: {what}\n{}", self.screen.screen().contents()),
            }
        }
    }

    fn until_text(&mut self, text: &str) {
        self.until(text, |screen| screen.contents().contains(text));
    }

    fn signal(&self, name: &str) {
        let pid = self.child.process_id().expect("a process").to_string();
        assert!(
            Command::new("kill")
                .args([&format!("-{name}"), &pid])
                .status()
                .expect("kill")
                .success()
        );
    }

    /// Waits for the end, reads what is left, and checks that the terminal is as it was.
    fn ends_clean(mut self) -> u32 {
        let status = self.child.wait().expect("the binary ends");
        while let Ok(bytes) = self.output.recv_timeout(Duration::from_millis(200)) {
            self.screen.process(&bytes);
        }
        let screen = self.screen.screen();
        assert!(!screen.alternate_screen(), "alternate screen left on");
        assert!(!screen.hide_cursor(), "cursor left hidden");
        assert!(!screen.bracketed_paste(), "bracketed paste left on");
        assert_eq!(
            format!("{:?}", self.master.get_termios()),
            self.before,
            "terminal modes differ"
        );
        status.exit_code()
    }
}

#[test]
fn starts_turns_resizes_and_quits() {
    let mut session = Session::start(&[]);
    session.until_text("cheapest");
    session.until_text("6500 km ");
    assert!(session.screen.screen().alternate_screen() && session.screen.screen().hide_cursor());
    session.send("\x1b[C");
    session.until_text("6600 km ");
    session.send("x");
    session.until_text("crossover: direct below");
    session.screen.screen_mut().set_size(cells(40), cells(120));
    session.master.resize(size(120, 40)).expect("resized");
    session.until("the wide table", |screen| {
        screen.contents().contains("final mass")
    });
    session.send("q");
    session.until_text("Unsaved changes");
    session.send("y");
    assert_eq!(session.ends_clean(), 0);
}

#[test]
fn signals_end_it_with_a_clean_terminal() {
    for (name, code) in [("TERM", 143), ("HUP", 129), ("INT", 130)] {
        let mut session = Session::start(&[]);
        session.until_text("cheapest");
        session.signal(name);
        assert_eq!(session.ends_clean(), code, "{name}");
    }
}

#[test]
fn control_c_asks_once_and_then_leaves() {
    let mut session = Session::start(&[]);
    session.until_text("cheapest");
    session.send("\x1b[C\x03");
    session.until_text("Unsaved changes");
    session.send("\x03");
    assert_eq!(session.ends_clean(), 0);
}

#[cfg(target_os = "linux")]
#[test]
fn control_z_goes_to_the_shell_and_back() {
    let mut session = Session::start(&[]);
    session.until_text("cheapest");
    session.send("\x1b[C");
    session.until_text("6600 km ");
    session.send("\x1a");
    session.until("the shell's screen", |screen| {
        !screen.alternate_screen() && !screen.hide_cursor()
    });
    let stat = format!(
        "/proc/{}/stat",
        session.child.process_id().expect("a process")
    );
    let deadline = Instant::now() + PATIENCE;
    while !std::fs::read_to_string(&stat)
        .expect("process")
        .contains(") T ")
    {
        assert!(Instant::now() < deadline, "the process does not stop");
        std::thread::yield_now();
    }
    session.signal("CONT");
    session.until("the explorer again", |screen| {
        screen.alternate_screen() && screen.contents().contains("6600 km ")
    });
    session.send("qy");
    assert_eq!(session.ends_clean(), 0);
}

#[test]
fn a_file_that_cannot_be_read_leaves_the_terminal_alone() {
    let session = Session::start(&["no-such-file.ron"]);
    assert_eq!(session.ends_clean(), 2);
}

#[test]
fn saving_as_and_what_is_on_disk() {
    let folder = tempfile::tempdir().expect("folder");
    let path = folder.path().join("mine.ron");
    let mut session = Session::start(&[]);
    session.until_text("cheapest");
    session.send("7000\r");
    session.until_text("7000 km ");
    session.send("S\x15");
    session.until_text("save as:");
    session.send(&format!("{}\r", path.display()));
    session.until_text("saved mine.ron");
    session.send("q");
    assert_eq!(session.ends_clean(), 0);
    let text = std::fs::read_to_string(&path).expect("saved");
    let loaded = stoop::scenario::file::parse("mine.ron", &text).expect("what was saved loads");
    assert_eq!(loaded.case.spec().target.shape.periapsis_alt_km(), 7000.0);
    assert!(text.contains("//"), "comments are kept");
}
