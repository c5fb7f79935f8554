package org.sweeptally.cli;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;
import java.util.SortedMap;
import java.util.TreeMap;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.ReasonCount;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.text.PartLines;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** Reads a recording through all regions of a site and remembers what the summary needs, in constant memory. */
final class DryRun {

    /** Lines between two signs of progress. */
    private static final int PROGRESS_LINES = 200;

    private final Site site;
    private final RecordFiles files;
    private final LocalSite local;
    private final FileClock clock;
    private final Map<String, RegionTally> tallies = new LinkedHashMap<>();
    private final SortedMap<RejectReason, ReasonTally> reasons = new TreeMap<>();
    private long lines;
    private long usableParts;

    /** How often one reason struck, and the first sentence about it. */
    record ReasonTally(long records, long detections, String example) {}

    DryRun(Site site, RecordFiles files) {
        this.site = site;
        this.files = files;
        this.clock = new FileClock(site.bounds().clockAheadSeconds());
        this.local = new LocalSite(site, region -> {
            RegionTally tally = new RegionTally(region, files, this::reject);
            tallies.put(region, tally);
            return tally;
        });
    }

    /** @param bytes of the whole recording, 0 if they are not known */
    void readAll(InputStream in, long bytes, Terminal terminal) throws IOException {
        PartLines parts = new PartLines(in, site);
        try {
            for (Optional<Intake> intake = parts.next(); intake.isPresent(); intake = parts.next()) {
                take(intake.get(), new SourcePosition(0, parts.linesRead() - 1));
                if (parts.linesRead() % PROGRESS_LINES == 0) {
                    String share = bytes > 0 ? 100 * parts.bytesRead() / bytes + " %, " : "";
                    terminal.progress(share + parts.linesRead() + " lines read");
                }
            }
            local.endOfInput();
        } catch (UncheckedIOException e) {
            throw e.getCause();
        } finally {
            terminal.endProgress();
        }
        lines = parts.linesRead();
    }

    private void take(Intake intake, SourcePosition source) {
        intake.reject().ifPresent(this::reject);
        intake.body().ifPresent(body -> part(body, source));
    }

    private void part(PartBody body, SourcePosition source) {
        usableParts += body.getUnusable() ? 0 : 1;
        Part part = body.getPart();
        SensorSettings sensor = site.sensor(part.getSensor()).orElseThrow();
        long logTime = part.getScanTimeMicros() + sensor.effectMicros();
        clock.hear(part.getSensor(), logTime).ifPresent(local::tick);
        local.part(body, source).ifPresent(this::reject);
    }

    private void reject(Reject reject) {
        files.reject(reject);
        for (ReasonCount reason : reject.getReasons()) {
            ReasonTally one = new ReasonTally(1, reason.getCount(), reason.getSentence());
            reasons.merge(reason.getReason(), one, (a, b) ->
                    new ReasonTally(a.records + b.records, a.detections + b.detections, a.example));
        }
    }

    Site site() {
        return site;
    }

    LocalSite local() {
        return local;
    }

    /** By region, in the order of the site. */
    Map<String, RegionTally> tallies() {
        return tallies;
    }

    SortedMap<RejectReason, ReasonTally> reasons() {
        return reasons;
    }

    long lines() {
        return lines;
    }

    /** Parts that could be read and of which something can be used. */
    long usableParts() {
        return usableParts;
    }
}
