//! Keys to actions: looks a key event up in the table of actions.

use super::action::{ACTIONS, Action, KeyName};
use crossterm::event::{KeyCode, KeyEvent, KeyModifiers};

/// The action a key stands for, if any.
pub fn action(key: &KeyEvent) -> Option<Action> {
    let name = named(key)?;
    ACTIONS
        .iter()
        .find(|entry| entry.keys.contains(&name))
        .map(|entry| entry.action)
}

/// The table's name of a key event.
fn named(key: &KeyEvent) -> Option<KeyName> {
    let has = |modifier| key.modifiers.contains(modifier);
    let (shift, alt, ctrl) = (
        has(KeyModifiers::SHIFT),
        has(KeyModifiers::ALT),
        has(KeyModifiers::CONTROL),
    );
    let plain = |name: &'static str| (!alt && !ctrl).then_some(KeyName::Named(name));
    match key.code {
        KeyCode::Char(c) if ctrl && !alt => Some(KeyName::Ctrl(c.to_ascii_lowercase())),
        KeyCode::Char(c) if !ctrl && !alt => Some(KeyName::Char(c)),
        KeyCode::Left => Some(KeyName::Named(if alt {
            "alt-left"
        } else if shift {
            "shift-left"
        } else {
            "left"
        })),
        KeyCode::Right => Some(KeyName::Named(if alt {
            "alt-right"
        } else if shift {
            "shift-right"
        } else {
            "right"
        })),
        KeyCode::Up => plain("up"),
        KeyCode::Down => plain("down"),
        KeyCode::Enter => plain("enter"),
        KeyCode::Tab => plain(if shift { "shift-tab" } else { "tab" }),
        KeyCode::BackTab => plain("shift-tab"),
        KeyCode::PageUp => plain("pageup"),
        KeyCode::PageDown => plain("pagedown"),
        KeyCode::Esc => Some(KeyName::Named("esc")),
        KeyCode::F(1) => plain("f1"),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn keys_find_their_actions() {
        let key = |code, modifiers| KeyEvent::new(code, modifiers);
        assert_eq!(
            action(&key(KeyCode::Right, KeyModifiers::NONE)),
            Some(Action::TurnUp)
        );
        assert_eq!(
            action(&key(KeyCode::Right, KeyModifiers::SHIFT)),
            Some(Action::TurnUpCoarse)
        );
        assert_eq!(
            action(&key(KeyCode::Right, KeyModifiers::ALT)),
            Some(Action::TurnUpFine)
        );
        assert_eq!(
            action(&key(KeyCode::Char('L'), KeyModifiers::SHIFT)),
            Some(Action::TurnUpCoarse)
        );
        assert_eq!(
            action(&key(KeyCode::Char('c'), KeyModifiers::CONTROL)),
            Some(Action::Quit)
        );
        assert_eq!(action(&key(KeyCode::Char('x'), KeyModifiers::ALT)), None);
        assert_eq!(action(&key(KeyCode::F(7), KeyModifiers::NONE)), None);
    }
}
