//! Typed places in the lists of a truss, so that a joint is never mistaken for a member.

use serde::{Deserialize, Serialize};

macro_rules! id {
    ($(#[$doc:meta])* $name:ident) => {
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
        #[serde(transparent)]
        pub struct $name(pub u32);

        impl $name {
            /// The place in the list, from 0.
            pub fn index(self) -> usize {
                self.0 as usize
            }

            /// The id of the item at `index`; lists are bounded far below `u32::MAX`.
            pub fn new(index: usize) -> Self {
                $name(u32::try_from(index).unwrap_or(u32::MAX))
            }
        }
    };
}

id!(
    /// A joint, by its place in [`crate::truss::Truss::joints`].
    JointId
);
id!(
    /// A member, by its place in [`crate::truss::Truss::members`].
    MemberId
);
id!(
    /// A figure, by its place in [`crate::truss::Truss::figures`].
    FigureId
);
id!(
    /// A support, by its place in [`crate::truss::Truss::supports`].
    SupportId
);
