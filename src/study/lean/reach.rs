//! How far a knob must move until the verdict turns: outwards in growing steps, then down to the digit.

use super::probe::{Costs, Prober};
use super::scale::{Scale, presses};
use super::{Effort, End, Reach, Turn, Why};
use crate::arrival::Way;
use crate::numerics::tolerance::SAME_COST_RELATIVE;
use crate::numerics::{minimum, root};
use crate::study::knob::Refused;

/// How far beyond a turning point its verdict must last, on the knob's scale, if a limit follows.
const SLIVER: f64 = 1e-6;

/// A search outwards from where a knob stands.
pub(super) struct Search<'a> {
    pub(super) prober: &'a Prober<'a>,
    pub(super) from: f64,
    pub(super) at_start: Costs,
    pub(super) scale: Scale,
    pub(super) effort: Effort,
}

/// A value of the knob and what the ways cost there.
#[derive(Clone, Copy)]
struct Node {
    x: f64,
    costs: Costs,
}

impl Search<'_> {
    fn best(&self) -> Option<Way> {
        self.at_start.best
    }

    fn node(&self, x: f64) -> Result<Node, Refused> {
        self.prober.costs(x).map(|costs| Node { x, costs })
    }

    /// Walks to an end of the range, or until the verdict turns.
    pub(super) fn towards(&self, end: f64) -> Reach {
        let mut here = Node {
            x: self.from,
            costs: self.at_start,
        };
        let mut before: Option<Node> = None;
        let Effort { first, growth } = self.effort;
        for x in self.scale.walk(self.from, end, first, growth) {
            match self.node(x) {
                Ok(next) => {
                    if let Some(turn) = self.between(before, here, next) {
                        return Reach::Turns(turn);
                    }
                    before = Some(here);
                    here = next;
                }
                Err(why) => return self.last_allowed(before, here, x, why),
            }
        }
        Reach::Never {
            to: end,
            end: End::Range,
        }
    }

    /// The scenario takes `here` and refuses `x`: goes on to the last value it takes.
    fn last_allowed(&self, before: Option<Node>, here: Node, x: f64, why: Refused) -> Reach {
        let to = if self.scale == Scale::Whole {
            here.x
        } else {
            root::border(|x| self.prober.setting(x).is_ok(), here.x, x).0
        };
        if to != here.x
            && let Ok(last) = self.node(to)
            && let Some(turn) = self.between(before, here, last)
        {
            return Reach::Turns(turn);
        }
        // The words of the refusal at the border itself: those further out may be about something else.
        let why = self.prober.setting(0.5 * (to + x)).err().unwrap_or(why);
        Reach::Never {
            to,
            end: End::Refused(why.to_string()),
        }
    }

    /// The first change of the cheapest way in the last cell, or hidden in the last two.
    fn between(&self, before: Option<Node>, here: Node, next: Node) -> Option<Turn> {
        let outer = if next.costs.best == self.best() {
            self.hidden(before, here, next)?
        } else {
            next
        };
        // A turn hidden in the last two cells may begin in the one before.
        let inner = match before {
            Some(before) if (outer.x - here.x) * (next.x - here.x) <= 0.0 => before,
            _ => here,
        };
        Some(self.refine(inner, outer, 0))
    }

    /// A value at which another verdict holds although it holds neither here nor there.
    ///
    /// Two ways to hide: a way becomes flyable (or stops) inside the cell and is cheaper just there; or its cost dips under the best way's
    /// between two values, which shows as a least gap at the middle one of three.
    fn hidden(&self, before: Option<Node>, here: Node, next: Node) -> Option<Node> {
        if self.scale == Scale::Whole {
            return None;
        }
        for way in Way::TABLE.iter().map(|entry| entry.way) {
            let flyable = |costs: &Costs| costs.of(way).is_some();
            if Some(way) == self.best() || flyable(&here.costs) == flyable(&next.costs) {
                continue;
            }
            let (near, far) = root::border(|x| self.prober.cost(x, way).is_some(), here.x, next.x);
            let side = if flyable(&here.costs) { near } else { far };
            if let Some(found) = self.other_verdict(side) {
                return Some(found);
            }
        }
        let (before, best) = (before?, self.best()?);
        for way in Way::TABLE.iter().map(|entry| entry.way) {
            let gap = |costs: &Costs| Some(costs.of(way)? - costs.of(best)?);
            let gaps = [&before.costs, &here.costs, &next.costs].map(gap);
            let [Some(a), Some(b), Some(c)] = gaps else {
                continue;
            };
            // A smooth gap has no more room below its least value than about its second difference.
            if way == best || !(b <= a && b < c && b <= a + c - 2.0 * b) {
                continue;
            }
            let start = minimum::Minimum {
                x: here.x,
                value: b,
            };
            let least = minimum::refine(
                |x| Some(self.prober.cost(x, way)? - self.prober.cost(x, best)?),
                before.x,
                next.x,
                start,
            );
            if let Some(found) = self.other_verdict(least.x) {
                return Some(found);
            }
        }
        None
    }

    /// The node at a value, where another verdict holds there.
    fn other_verdict(&self, x: f64) -> Option<Node> {
        self.node(x)
            .ok()
            .filter(|node| node.costs.best != self.best())
    }

    /// Narrows the turn between a value where the verdict holds and one where it does not.
    ///
    /// Where two ways cross, a root of the difference of their costs; where a limit decides, bisection of the verdict. A third way that wins
    /// at the place found turns the verdict even sooner.
    fn refine(&self, inner: Node, outer: Node, depth: u32) -> Turn {
        let whole = self.scale == Scale::Whole;
        let tie = (!whole).then(|| self.tie(inner, outer)).flatten();
        if let Some(x) = tie {
            match self.node(x) {
                Ok(middle)
                    if depth < 4
                        && middle.costs.best != self.best()
                        && middle.costs.best != outer.costs.best =>
                {
                    return self.refine(inner, middle, depth + 1);
                }
                _ => return self.turn(x, outer.costs.best, Why::Cheaper),
            }
        }
        let (near, far) = if whole {
            (inner.x, outer.x)
        } else {
            root::border(
                |x| {
                    self.prober
                        .costs(x)
                        .is_ok_and(|costs| costs.best == self.best())
                },
                inner.x,
                outer.x,
            )
        };
        let (near, far) = self.past_a_sliver(near, far);
        let to = self
            .prober
            .costs(far)
            .map_or(outer.costs.best, |costs| costs.best);
        let lost = self
            .best()
            .and_then(|best| self.prober.objections(far, best));
        let freed = to.and_then(|to| self.prober.objections(near, to));
        let why = match (lost, freed) {
            (Some(lost), _) => Why::Lost(lost),
            (None, Some(freed)) => Why::Freed(freed),
            (None, None) => Why::Cheaper,
        };
        // A limit is met at the last value that keeps it; what is set free, at the first that does.
        let value = if matches!(why, Why::Lost(_)) && !whole {
            near
        } else {
            far
        };
        self.turn(value, to, why)
    }

    /// A border moved on past a sliver. Where two ways become one and the same (a loop whose apoapsis meets the target's, a brake that meets the
    /// target), the one with fewer starts wins by default for the last millionth before a limit ends both; it is the limit that counts.
    fn past_a_sliver(&self, near: f64, far: f64) -> (f64, f64) {
        if self.scale == Scale::Whole {
            return (near, far);
        }
        let best = |x: f64| self.prober.costs(x).ok().map(|costs| costs.best);
        let Ok(there) = self.prober.costs(far) else {
            return (near, far);
        };
        let one_and_the_same = || {
            let (old, new) = (there.of(self.best()?)?, there.of(there.best?)?);
            Some((old - new).abs() <= SLIVER * old)
        };
        if one_and_the_same() != Some(true) {
            return (near, far);
        }
        let aside = (SLIVER * self.scale.size(far)).copysign(far - self.from);
        let beyond = far + aside;
        match best(beyond) {
            Some(then) if then != there.best && then != self.best() => {
                root::border(|x| best(x) == Some(then), far, beyond)
            }
            _ => (near, far),
        }
    }

    /// Where the costs of the old and the new best way are equal. `None` where one of the two does not exist throughout, or the two are
    /// equal over a stretch, so that a root means nothing.
    fn tie(&self, inner: Node, outer: Node) -> Option<f64> {
        let (old, new) = (self.best()?, outer.costs.best?);
        let gap = |costs: &Costs| {
            let (old, new) = (costs.of(old)?, costs.of(new)?);
            (SAME_COST_RELATIVE * old.max(new) < (old - new).abs()).then_some(old - new)
        };
        gap(&inner.costs)?;
        gap(&outer.costs)?;
        root::bracketed(
            |x| {
                let costs = self.prober.costs(x).ok()?;
                Some(costs.of(old)? - costs.of(new)?)
            },
            inner.x,
            outer.x,
        )
        .ok()
    }

    fn turn(&self, value: f64, to: Option<Way>, why: Why) -> Turn {
        Turn {
            value,
            change: value - self.from,
            presses: presses(
                self.prober.knob,
                self.prober.case.body().radius_km,
                self.from,
                value,
            ),
            to,
            why,
        }
    }
}
