//! The caution, short and in full: it stands wherever a result is shown or printed.

/// The short form, under the sentence and in every answer.
pub const SHORT: &str = "For study, teaching and exercises. The umpire, doctrine and the law decide.";

/// The full form, at the foot of the page.
pub const FULL: &str = "Aftercount is an aggregate model for study, teaching and exercises. It knows nothing of terrain, \
weather, supply, command, morale, prisoners, the wounded or civilians. Losses are combatants no longer in the fight, \
killed, wounded, captured or gone, and the model does not tell them apart. It is not for directing live operations or \
judging anyone's safety. The organisation's doctrine, the law and qualified judgement decide.";
