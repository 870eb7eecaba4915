//! Nothing that a person made is lost: undo, saving into their text, the disk, the lock, the journal.

mod deleted;
mod disk;
mod drawn;
mod fields;
mod history;
mod journal;
mod layouts;
mod starters;
mod stretches;
mod text;
