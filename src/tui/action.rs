//! The table of actions. Keys, footer, help page and `docs/keys.md` all come from here, so they cannot disagree.

use super::model::Lens;

/// Everything a key can do.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Action {
    /// Select the knob above or below.
    KnobUp,
    /// Select the knob below.
    KnobDown,
    /// Turn the knob down.
    TurnDown,
    /// Turn the knob up.
    TurnUp,
    /// Turn down, ten times coarser.
    TurnDownCoarse,
    /// Turn up, ten times coarser.
    TurnUpCoarse,
    /// Turn down, ten times finer.
    TurnDownFine,
    /// Turn up, ten times finer.
    TurnUpFine,
    /// Type a value.
    Enter,
    /// Leave the value to the program.
    Best,
    /// Burns that last, or take no time.
    ToggleBurns,
    /// The next way of pointing the engine.
    NextSteering,
    /// Go to the cheapest altitude.
    ToCheapest,
    /// Go to the nearest crossover, then to the next.
    ToCrossover,
    /// Take back.
    Undo,
    /// Do again what was taken back.
    Redo,
    /// Next lens.
    NextLens,
    /// Previous lens.
    PreviousLens,
    /// Open a lens.
    Open(Lens),
    /// Show the next way in the burns lens.
    NextWay,
    /// Linear or logarithmic horizontal axis.
    ToggleLog,
    /// Linear or logarithmic vertical axis.
    ToggleVerticalLog,
    /// Next quantity on the vertical axis.
    NextQuantity,
    /// Look closer.
    ZoomIn,
    /// Look wider.
    ZoomOut,
    /// The whole range again.
    ZoomAll,
    /// Scroll a page up.
    PageUp,
    /// Scroll a page down.
    PageDown,
    /// Save.
    Save,
    /// Save under another name.
    SaveAs,
    /// Read the file again.
    Reload,
    /// The help page.
    Help,
    /// Leave a prompt or the help page; clear a message.
    Cancel,
    /// Stop the program and go to the shell; `fg` comes back.
    Suspend,
    /// Leave.
    Quit,
}

/// A key as the table names it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum KeyName {
    /// A character, as typed.
    Char(char),
    /// A character with Ctrl.
    Ctrl(char),
    /// A named key.
    Named(&'static str),
}

/// One line of the table.
#[derive(Clone, Copy, Debug)]
pub struct Entry {
    /// The action.
    pub action: Action,
    /// Its name in documents and configuration.
    pub name: &'static str,
    /// Its keys, the first shown in the footer.
    pub keys: &'static [KeyName],
    /// What it does, in a few words.
    pub help: &'static str,
    /// Word in the footer; empty if it does not stand there.
    pub hint: &'static str,
    /// Heading on the help page.
    pub group: Group,
}

/// Headings of the help page.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Group {
    /// Turning knobs.
    Knobs,
    /// Going places.
    Places,
    /// What is shown.
    View,
    /// Files and leaving.
    File,
}

impl Group {
    /// All headings with their text.
    pub const ALL: &'static [(Group, &'static str)] = &[
        (Group::Knobs, "Turn a knob"),
        (Group::Places, "Go to"),
        (Group::View, "Look"),
        (Group::File, "File"),
    ];
}

use Action as A;
use KeyName::{Char, Ctrl, Named};

const fn entry(
    action: Action,
    name: &'static str,
    keys: &'static [KeyName],
    help: &'static str,
    hint: &'static str,
    group: Group,
) -> Entry {
    Entry {
        action,
        name,
        keys,
        help,
        hint,
        group,
    }
}

/// The table.
pub const ACTIONS: &[Entry] = &[
    entry(
        A::TurnDown,
        "turn-down",
        &[Named("left"), Char('h')],
        "turn the knob down",
        "",
        Group::Knobs,
    ),
    entry(
        A::TurnUp,
        "turn-up",
        &[Named("right"), Char('l')],
        "turn the knob up",
        "turn",
        Group::Knobs,
    ),
    entry(
        A::TurnDownCoarse,
        "turn-down-coarse",
        &[Named("shift-left"), Char('H')],
        "turn down, ten times coarser",
        "",
        Group::Knobs,
    ),
    entry(
        A::TurnUpCoarse,
        "turn-up-coarse",
        &[Named("shift-right"), Char('L')],
        "turn up, ten times coarser",
        "",
        Group::Knobs,
    ),
    entry(
        A::TurnDownFine,
        "turn-down-fine",
        &[Named("alt-left"), Char('<')],
        "turn down, ten times finer",
        "",
        Group::Knobs,
    ),
    entry(
        A::TurnUpFine,
        "turn-up-fine",
        &[Named("alt-right"), Char('>')],
        "turn up, ten times finer",
        "",
        Group::Knobs,
    ),
    entry(
        A::KnobUp,
        "knob-up",
        &[Named("up"), Char('k')],
        "select the knob above",
        "",
        Group::Knobs,
    ),
    entry(
        A::KnobDown,
        "knob-down",
        &[Named("down"), Char('j')],
        "select the knob below",
        "knob",
        Group::Knobs,
    ),
    entry(
        A::Enter,
        "enter",
        &[Named("enter")],
        "type a value, with its unit if you like; a digit starts at once",
        "type",
        Group::Knobs,
    ),
    entry(
        A::Best,
        "best",
        &[Char('B')],
        "leave brake, loop apoapsis or steps to the program",
        "",
        Group::Knobs,
    ),
    entry(
        A::ToCrossover,
        "to-crossover",
        &[Char('x')],
        "the nearest crossover, again for the next one",
        "crossover",
        Group::Places,
    ),
    entry(
        A::ToggleBurns,
        "burns-last",
        &[Char('f')],
        "burns finite (integrated with the engine) or impulsive",
        "",
        Group::Knobs,
    ),
    entry(
        A::NextSteering,
        "steering",
        &[Char('F')],
        "steering: against velocity, fixed attitude, turning attitude",
        "",
        Group::Knobs,
    ),
    entry(
        A::ToCheapest,
        "to-cheapest",
        &[Char('z')],
        "the cheapest direct altitude",
        "cheapest",
        Group::Places,
    ),
    entry(
        A::Undo,
        "undo",
        &[Char('u')],
        "take back the last turn",
        "undo",
        Group::Places,
    ),
    entry(
        A::Redo,
        "redo",
        &[Char('r'), Ctrl('r')],
        "do again what was taken back",
        "",
        Group::Places,
    ),
    entry(
        A::NextLens,
        "next-lens",
        &[Named("tab")],
        "next lens",
        "lens",
        Group::View,
    ),
    entry(
        A::PreviousLens,
        "previous-lens",
        &[Named("shift-tab")],
        "previous lens",
        "",
        Group::View,
    ),
    entry(
        A::Open(Lens::Curve),
        "curve",
        &[Char('v')],
        "curve: what every altitude costs, way by way",
        "",
        Group::View,
    ),
    entry(
        A::Open(Lens::Path),
        "path",
        &[Char('p')],
        "path: a picture of a way, to scale",
        "",
        Group::View,
    ),
    entry(
        A::Open(Lens::Burns),
        "burns",
        &[Char('b')],
        "burns: each burn of a way, before and after",
        "",
        Group::View,
    ),
    entry(
        A::Open(Lens::Notes),
        "notes",
        &[Char('n')],
        "notes: reasons, warnings, assumptions, sources in full",
        "",
        Group::View,
    ),
    entry(
        A::NextWay,
        "next-way",
        &[Char('w')],
        "burns and path: the next way",
        "",
        Group::View,
    ),
    entry(
        A::ToggleLog,
        "log",
        &[Char('t')],
        "altitude axis linear or logarithmic",
        "",
        Group::View,
    ),
    entry(
        A::ToggleVerticalLog,
        "log-vertical",
        &[Char('T')],
        "vertical axis linear or logarithmic",
        "",
        Group::View,
    ),
    entry(
        A::NextQuantity,
        "quantity",
        &[Char('y')],
        "next quantity on the vertical axis",
        "",
        Group::View,
    ),
    entry(
        A::ZoomIn,
        "zoom-in",
        &[Char('i')],
        "curve and path: look closer",
        "",
        Group::View,
    ),
    entry(
        A::ZoomOut,
        "zoom-out",
        &[Char('o')],
        "curve and path: look wider",
        "",
        Group::View,
    ),
    entry(
        A::ZoomAll,
        "zoom-all",
        &[Char('a')],
        "curve and path: all again",
        "",
        Group::View,
    ),
    entry(
        A::PageUp,
        "page-up",
        &[Named("pageup")],
        "scroll up",
        "",
        Group::View,
    ),
    entry(
        A::PageDown,
        "page-down",
        &[Named("pagedown"), Char(' ')],
        "scroll down",
        "",
        Group::View,
    ),
    entry(
        A::Save,
        "save",
        &[Char('s'), Ctrl('s')],
        "save the scenario",
        "save",
        Group::File,
    ),
    entry(
        A::SaveAs,
        "save-as",
        &[Char('S')],
        "save under another name",
        "",
        Group::File,
    ),
    entry(
        A::Reload,
        "reload",
        &[Char('R')],
        "read the file again",
        "",
        Group::File,
    ),
    entry(
        A::Help,
        "help",
        &[Char('?'), Named("f1")],
        "this page",
        "help",
        Group::File,
    ),
    entry(
        A::Cancel,
        "cancel",
        &[Named("esc")],
        "leave a prompt or this page",
        "",
        Group::File,
    ),
    entry(
        A::Suspend,
        "suspend",
        &[Ctrl('z')],
        "to the shell; fg comes back",
        "",
        Group::File,
    ),
    entry(
        A::Quit,
        "quit",
        &[Char('q'), Ctrl('c')],
        "leave; asks once if something is unsaved",
        "quit",
        Group::File,
    ),
];

impl KeyName {
    /// As shown to people: `x`, `Ctrl-S`, `left`.
    pub fn shown(self) -> String {
        match self {
            Char(' ') => "space".to_owned(),
            Char(key) => key.to_string(),
            Ctrl(key) => format!("Ctrl-{}", key.to_ascii_uppercase()),
            Named(name) => name.to_owned(),
        }
    }
}

/// The keys of an entry as shown: `left h`.
pub fn keys_shown(entry: &Entry) -> String {
    entry
        .keys
        .iter()
        .map(|key| key.shown())
        .collect::<Vec<_>>()
        .join(" ")
}

/// The reference page of all keys, Markdown: what `docs/keys.md` holds.
pub fn keys_page() -> String {
    let mut out =
        String::from("# Keys\n\nMade from the table of actions; a test keeps it in step.\n");
    for (group, title) in Group::ALL {
        out.push_str(&format!(
            "\n## {title}\n\n| key | action | does |\n|---|---|---|\n"
        ));
        for entry in ACTIONS.iter().filter(|entry| entry.group == *group) {
            let keys: Vec<String> = entry
                .keys
                .iter()
                .map(|key| format!("`{}`", key.shown()))
                .collect();
            out.push_str(&format!(
                "| {} | `{}` | {} |\n",
                keys.join(" "),
                entry.name,
                entry.help
            ));
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_key_does_two_things_and_none_starts_a_number() {
        let keys: Vec<KeyName> = ACTIONS
            .iter()
            .flat_map(|entry| entry.keys.iter().copied())
            .collect();
        for key in &keys {
            assert_eq!(
                keys.iter().filter(|other| *other == key).count(),
                1,
                "{key:?}"
            );
            assert!(
                !matches!(key, Char(c) if c.is_ascii_digit() || "+-.".contains(*c)),
                "{key:?}"
            );
        }
        for entry in ACTIONS {
            let same = |other: &&Entry| other.name == entry.name || other.action == entry.action;
            assert_eq!(ACTIONS.iter().filter(same).count(), 1, "{}", entry.name);
        }
    }
}
