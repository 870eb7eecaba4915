//! The screen. A key becomes an [`Action`], [`update`] changes the [`App`], [`draw`] shows it; only [`run`] knows threads and the
//! terminal.

mod action;
mod app;
mod arm;
mod ask;
mod bounds;
mod chart;
mod click;
mod edit_page;
mod editing;
mod edits;
mod file;
mod filter;
mod footer;
mod headline;
mod help;
mod jog;
mod joints;
mod keymap;
mod keys;
mod layout;
mod list;
mod menu;
mod not_checked;
mod options;
mod page;
mod phrases;
mod raster;
mod remedies;
mod ribbon;
mod rows;
mod run;
mod scene;
mod sheet;
mod signing;
mod stretch;
mod theme;
mod update;
mod why;

use ratatui::buffer::Buffer;
use ratatui::layout::Rect;

pub use action::Action;
pub use app::{App, Asking, FileWish, Item, Menu, Mode, Page, Pane, Question, Wish};
pub use jog::{Deed, Jogging};
pub use keymap::{Keymap, action_name, changeable, kept};
pub use keys::{BINDINGS, Binding, action_of};
pub use options::Options;
pub use remedies::{is_to_stop as remedies_are_to_stop, wanted as remedies_wanted};
pub use run::{Screen, Started, restore, run};
pub use signing::{Decision, Signing};
pub use stretch::OnStretch;
pub use theme::Theme;
pub use update::update;

use sheet::Sheet;

/// Draws the app into an area of a buffer. Nothing is computed here that could be known before.
pub fn draw(buffer: &mut Buffer, area: Rect, app: &App) {
    draw_body(buffer, area, app);
    footer::draw_message(&mut Sheet::new(buffer, area, app.theme), app);
}

fn draw_body(buffer: &mut Buffer, area: Rect, app: &App) {
    let theme = app.theme;
    let layout = update::layout_in(app, area);
    headline::draw(&mut Sheet::new(buffer, layout.headline, theme), app);
    footer::draw(&mut Sheet::new(buffer, layout.footer, theme), app);
    if let Mode::Page(page, scroll) = app.mode {
        let height = area.height - layout.headline.height - layout.footer.height;
        let whole = Rect { y: layout.headline.bottom(), height, ..area };
        page::draw(&mut Sheet::new(buffer, whole, theme), app, page, scroll);
        return;
    }
    if let Mode::Editing(editing) = &app.mode {
        let height = area.height - layout.headline.height - layout.footer.height;
        let whole = Rect { y: layout.headline.bottom(), height, ..area };
        edit_page::draw(&mut Sheet::new(buffer, whole, theme), app, editing);
        return;
    }
    if matches!(app.mode, Mode::SignOff) {
        let height = area.height - layout.headline.height - layout.footer.height;
        let whole = Rect { y: layout.headline.bottom(), height, ..area };
        signing::draw(&mut Sheet::new(buffer, whole, theme), app);
        return;
    }
    if matches!(app.mode, Mode::Remedies) {
        let height = area.height - layout.headline.height - layout.footer.height;
        let whole = Rect { y: layout.headline.bottom(), height, ..area };
        remedies::draw(&mut Sheet::new(buffer, whole, theme), app);
        return;
    }
    if app.jog.is_some() {
        let height = area.height - layout.headline.height - layout.footer.height;
        let whole = Rect { y: layout.headline.bottom(), height, ..area };
        jog::draw(&mut Sheet::new(buffer, whole, theme), app);
        if let Mode::Menu(menu) = &app.mode {
            menu::draw(&mut Sheet::new(buffer, area, theme), menu);
        }
        return;
    }
    let mut pane = |area: Rect, draw: fn(&mut Sheet, &App)| {
        if !area.is_empty() {
            draw(&mut Sheet::new(buffer, area, theme), app);
        }
    };
    pane(layout.ribbon, ribbon::draw);
    pane(layout.list, list::draw);
    pane(layout.why, why::draw);
    pane(layout.joints, joints::draw);
    pane(layout.chart, chart::draw);
    pane(layout.arm, arm::draw);
    pane(layout.post, |sheet, app| {
        for y in 0..sheet.height() {
            sheet.put(0, y, app.theme.post(), ratatui::style::Style::new());
        }
    });
    if let Mode::Menu(menu) = &app.mode {
        menu::draw(&mut Sheet::new(buffer, area, theme), menu);
    }
}
