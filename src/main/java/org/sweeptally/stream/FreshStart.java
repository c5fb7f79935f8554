package org.sweeptally.stream;

import java.util.Optional;

/** Knows whether the regions of a partition of the region log, of which no state is there, may begin from nothing. */
interface FreshStart {

    /** Why they may not; empty if they may. */
    Optional<String> refusal(int partition);
}
