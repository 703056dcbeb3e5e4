//! Reading: a sheet's text becomes reports as written. One file a quantity (nom parsers), then their assembly.
//!
//! What is not here: astronomy, house rules, judgement. Reading never fails: what is not understood stays as itself.
//!
//! To add a way of writing something: a word goes into `grammar/words/*.yaml`; a form goes into the file of its quantity
//! and into the production of the same name in `grammar/*.pest`, with examples beside it.

pub mod angle;
mod assemble;
pub mod clock;
pub mod date;
pub mod equinox;
mod evidence;
mod fields;
mod fold;
mod forms;
mod head;
pub mod instant;
pub mod marks;
mod names;
pub mod number;
mod parts;
mod pieces;
mod position;
mod row;
pub mod run;
pub mod scan;
mod scope;
pub mod site;
mod standing;
mod statements;
pub mod stet;
mod table;
pub mod text;
pub mod uncertainty;
pub mod words;
mod wrap;
pub mod zone;

pub use assemble::read;
