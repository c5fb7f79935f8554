package org.sweeptally.cli;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.region.intake.Times;
import org.sweeptally.replay.Span;
import picocli.CommandLine.Option;

/** Options that say of what time, and of which regions. */
final class SpanOptions {

    @Option(
            names = "--from",
            paramLabel = "TIME",
            description = "From this log time on, such as 2031-05-01T04:02:00Z (default: all that is kept).")
    private String from;

    @Option(
            names = "--to",
            paramLabel = "TIME",
            description = "Up to this log time, itself excluded (default: all that has been published).")
    private String to;

    @Option(
            names = "--region",
            paramLabel = "REGION",
            arity = "1..*",
            description = "Only these regions (default: all of the site).")
    private List<String> regions = new ArrayList<>();

    /** @throws UsageException if a time is none, or there is nothing between the two */
    Span span() {
        return span(Span.ALL);
    }

    /**
     * @param all what there is, and what is meant unless the options say otherwise
     * @throws UsageException also if a time lies outside of what there is
     */
    Span span(Span all) {
        Span span = new Span(micros("--from", from, all.fromMicros()), micros("--to", to, all.toMicros()));
        if (span.fromMicros() < all.fromMicros() || span.toMicros() > all.toMicros()) {
            throw new UsageException("the archive holds what is " + all.text() + ", and not all that is "
                    + span.text());
        }
        if (span.fromMicros() >= span.toMicros()) {
            throw new UsageException("--from " + from + " is not before --to " + to);
        }
        return span;
    }

    private static long micros(String option, String text, long otherwise) {
        if (text == null) {
            return otherwise;
        }
        return Times.parse(text)
                .orElseThrow(() -> new UsageException(option + " " + text + ": " + Times.FORM));
    }

    /** @throws UsageException if one is asked for that the site does not have */
    List<String> regions(List<String> known) {
        for (String region : regions) {
            if (!known.contains(region)) {
                throw new UsageException("--region " + region + ": the site's regions are " + known);
            }
        }
        return regions.isEmpty() ? known : known.stream().filter(regions::contains).toList();
    }
}
