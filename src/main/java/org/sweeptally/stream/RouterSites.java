package org.sweeptally.stream;

import java.util.Collection;
import java.util.NavigableMap;
import java.util.Optional;
import java.util.TreeMap;
import org.sweeptally.event.Reject;
import org.sweeptally.region.PartRouter;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.SourcePosition;

/**
 * Reads parts by the settings that hold at their scan time: the latest revision, but for parts from before it holds.
 */
final class RouterSites {

    private final NavigableMap<Integer, BySite> byRevision = new TreeMap<>();

    /** What reads and routes by one revision. */
    private record BySite(Revision revision, PartDecoder decoder, PartRouter router) {

        boolean holdsAt(Long scanTimeMicros) {
            Long from = revision.entry().getLogTimeMicros();
            return from == null || scanTimeMicros == null || scanTimeMicros >= from;
        }
    }

    /** A part that was read, and the router that knows where it goes. */
    record Read(Intake intake, PartRouter router) {}

    RouterSites(Collection<Revision> revisions) {
        for (Revision revision : revisions) {
            byRevision.put(revision.number(), new BySite(
                    revision, new PartDecoder(revision.site()), new PartRouter(revision.site())));
        }
    }

    Read read(byte[] bytes, SourcePosition source) {
        Intake intake = null;
        BySite last = null;
        for (BySite site : byRevision.descendingMap().values()) {
            last = site;
            intake = site.decoder().decode(bytes, Optional.of(source));
            if (site.holdsAt(scanTime(intake))) {
                break;
            }
        }
        return new Read(intake, last.router());
    }

    private static Long scanTime(Intake intake) {
        return intake.body()
                .map(body -> (Long) body.getPart().getScanTimeMicros())
                .orElseGet(() -> intake.reject().map(Reject::getScanTimeMicros).orElse(null));
    }
}
