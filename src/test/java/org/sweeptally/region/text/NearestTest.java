package org.sweeptally.region.text;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;

class NearestTest {

    /** Common textbook example of the Levenshtein distance, no source: kitten to sitting takes 3 edits. */
    @Test
    void theDistanceCountsEdits() {
        assertThat(Nearest.distance("kitten", "sitting")).isEqualTo(3);
        assertThat(Nearest.distance("", "abc")).isEqualTo(3);
        assertThat(Nearest.distance("abc", "")).isEqualTo(3);
        assertThat(Nearest.distance("abc", "abc")).isZero();
    }

    @Test
    void theNearestNameIsFoundWhateverTheCase() {
        List<String> known = List.of("latitude", "longitude", "heightMetres");
        assertThat(Nearest.to("Lattitude", known)).isEqualTo("latitude");
        assertThat(Nearest.to("LONGITUDE", known)).isEqualTo("longitude");
        assertThat(Nearest.to("height_metres", known)).isEqualTo("heightMetres");
        assertThat(Nearest.to("x".repeat(1_000_000), known)).isIn(known);
    }
}
