//! Roles to styles. Colour only repeats what a glyph or a word already says.
//!
//! The way colours are blue, orange, teal and purple of middle lightness: apart for the common colour-vision deficiencies, and
//! readable on dark and on light grounds (contrast at least 3.5 against both black and white).

use crate::arrival::Way;
use crate::report::plot::Role;
use ratatui::style::{Color, Modifier, Style};

/// The styles in use.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Theme {
    colour: bool,
}

impl Theme {
    /// With colours.
    pub const COLOURED: Theme = Theme { colour: true };
    /// Weights only.
    pub const PLAIN: Theme = Theme { colour: false };

    fn tint(self, index: u8) -> Style {
        if self.colour {
            Style::new().fg(Color::Indexed(index))
        } else {
            Style::new()
        }
    }

    /// A way's colour.
    pub fn way(self, way: Way) -> Style {
        match way {
            Way::Direct => self.tint(33),
            Way::Dip => self.tint(166),
            Way::Loop => self.tint(30),
            Way::Steps => self.tint(133),
        }
    }

    /// A cell of a picture.
    pub fn role(self, role: Role) -> Style {
        match role {
            Role::Blank => Style::new(),
            Role::Axis | Role::Label => self.faint(),
            Role::Way(way) => self.way(way),
            Role::Companion(_) => self.faint(),
            Role::Here => Style::new().add_modifier(Modifier::BOLD),
            Role::Cheapest | Role::Crossover => Style::new().add_modifier(Modifier::BOLD),
        }
    }

    /// Secondary text. Not `DIM`, which some terminals render unreadably: the default colour does.
    pub fn faint(self) -> Style {
        self.tint(244)
    }

    /// Headings and what matters most.
    pub fn strong(self) -> Style {
        Style::new().add_modifier(Modifier::BOLD)
    }

    /// The selected knob.
    pub fn selected(self) -> Style {
        Style::new().add_modifier(Modifier::REVERSED)
    }

    /// A refusal or warning.
    pub fn alert(self) -> Style {
        self.tint(166).add_modifier(Modifier::BOLD)
    }
}
