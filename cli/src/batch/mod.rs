//! Many sections, one row each: which sections ([`job`]), what is asked of each ([`columns`]), solving
//! them on all cores ([`answer`], [`work`]), and the rows in a file that grows ([`row`], [`output`]); a [`chart`] of them. [`search`] seeks the
//! dimension that meets a target.

pub mod answer;
pub mod chart;
pub mod columns;
pub mod job;
pub mod output;
pub mod row;
pub mod search;
pub mod work;
