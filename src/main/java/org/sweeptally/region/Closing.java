package org.sweeptally.region;

/** How a scan ends. */
enum Closing {
    BY_PART(true, "its closing part came"),
    BY_NEXT(true, "its sensor went on to a later scan"),
    BY_PROMISE(true, "its sensor promised that no more of it would come"),
    BY_END(true, "the input ended"),
    BY_SILENCE(false, "its sensor was passed over before the scan was closed"),
    BY_RESTART(false, "its sensor started again before the scan was closed"),
    BY_SETTINGS(false, "settings took its sensor away before the scan was closed");

    private final boolean whole;
    private final String words;

    Closing(boolean whole, String words) {
        this.whole = whole;
        this.words = words;
    }

    /** Whether all of the scan has come, as far as one can know. */
    boolean isWhole() {
        return whole;
    }

    String words() {
        return words;
    }
}
