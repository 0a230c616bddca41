//! A triangle left at zero: the commonest way in which half a matrix is typed.

use super::diagnostic::{Finding, Findings, Kind};
use super::repair::{Action, Repair};
use super::{Entry, Origin, Shape};

/// Says when one triangle holds only zeros while the other does not, and offers
/// to mirror it.
pub(crate) fn check(entry: &Entry, findings: &mut Findings) {
    let Some(settings) = entry.settings else {
        return;
    };
    if settings.shape != Some(Shape::Full) || entry.rows != entry.cols || findings.has_errors() {
        return;
    }
    let zero_where = |keep: fn(usize, usize) -> bool| {
        entry.cells.iter().enumerate().all(|(index, cell)| {
            let zero = cell
                .value
                .as_ref()
                .is_some_and(|value| value.re.is_zero() && value.im.is_zero());
            zero || !keep(index / entry.cols, index % entry.cols)
        })
    };
    let given = entry.cells.iter().all(|cell| cell.origin == Origin::Given);
    let (zero, other, action) = match (
        zero_where(|row, col| col > row),
        zero_where(|row, col| col < row),
    ) {
        (true, false) => ("upper", "lower", Action::MirrorLower),
        (false, true) => ("lower", "upper", Action::MirrorUpper),
        _ => return,
    };
    let finding = Finding::warning(
        Kind::TriangleDisagrees,
        format!("The {zero} triangle holds only zeros, the {other} one does not."),
    )
    .expected("conjugate numbers across the diagonal");
    findings.push(if given {
        finding.repair(Repair::new(
            format!("Mirror the {other} triangle"),
            action,
            settings,
        ))
    } else {
        finding
    });
}
