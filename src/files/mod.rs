//! Reading arm files and recipes from TOML: everything that is wrong with a file is told at once, with line and column.
//!
//! A file is walked table by table. What can't be taken as it stands is complained about and replaced by a harmless stand-in, so
//! that the walk goes on and the checks of [`Arm::build`](crate::arm::Arm::build) and
//! [`Recipe::faults`](crate::program::Recipe::faults) can add what they find without repeating it.

mod arm_file;
mod aside;
mod below;
mod body;
mod cell;
mod complaint;
mod content;
mod demo;
mod drive;
mod heading;
mod holder;
mod joint;
mod journal;
mod keys;
mod lock;
mod opened;
mod own_key;
mod page;
mod placed;
mod points_table;
mod position;
mod raw;
mod reasons;
mod recipe_file;
mod record_file;
mod record_text;
mod records;
mod save;
mod source;
mod sources;
mod stand_in;
mod standing;
mod starter;
mod table;
mod value;
mod waypoint;

pub use arm_file::read_arm;
pub use aside::Aside;
pub use below::{Below, is_folder, recipes_below};
pub use complaint::{Complaint, Rejected};
pub use content::content;
pub use demo::demo;
pub use holder::{Holder, Runs};
pub use journal::{Journal, Recovered, left_behind};
pub use keys::{ChosenKeys, KeyName, NamedKey, PlainKey, keys_file, open_keys, read_keys};
pub use lock::{Lock, NotLocked};
pub use opened::{Opened, open, open_arm};
pub use own_key::{Asks, NoKey, OwnKey};
pub use points_table::read_points;
pub use reasons::{read_reasons, reasons_template};
pub use recipe_file::read_recipe;
pub use record_file::read_record;
pub use record_text::{record_text, signed_part};
pub use records::{Kept, NotKept, earlier_record, keep_record};
pub use save::{
    Content, NewText, NotSaved, Saved, Texts, changes_on_disk, make_folder, text_of_edited, text_of_new, write, write_anyway,
};
pub use source::Source;
pub use sources::{MOST_PEOPLE, is_there, no_link, open_itself, read_text, record_path, set_aside, signature_path, sources};
pub use standing::out_of_date;
pub use starter::{starting_arm, starting_postures, starting_recipe};
