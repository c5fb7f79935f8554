package org.sweeptally.replay;

import java.util.Optional;

/**
 * What is done beside a replay.
 *
 * @param explanations written meanwhile
 * @param change       other settings that run beside the record
 * @param files        for what they would have made other
 */
public record Beside(Optional<Explanations> explanations, Optional<SettingsChange> change, WhatIfFiles files) {

    /** Nothing. */
    public static final Beside NOTHING =
            new Beside(Optional.empty(), Optional.empty(), new WhatIfFiles(Optional.empty()));
}
