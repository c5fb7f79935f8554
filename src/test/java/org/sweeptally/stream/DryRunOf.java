package org.sweeptally.stream;

import java.util.List;
import java.util.Optional;
import org.sweeptally.event.Part;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** The same parts through the machines without a bus. */
final class DryRunOf {

    private DryRunOf() {}

    static Published of(Site site, List<Part> parts) {
        return values(site, parts.stream().map(Wire::encode).toList());
    }

    /** As above, of whatever bytes stand on the one partition of the detections, with what no region hears rejected. */
    static Published values(Site site, List<byte[]> values) {
        Published published = new Published();
        LocalSite local = new LocalSite(site, published::outputsOf);
        PartDecoder decoder = new PartDecoder(site);
        for (int i = 0; i < values.size(); i++) {
            SourcePosition source = new SourcePosition(0, i);
            Intake intake = decoder.decode(values.get(i), Optional.of(source));
            intake.reject().ifPresent(published::reject);
            intake.body().flatMap(body -> local.part(body, source)).ifPresent(published::reject);
        }
        return published;
    }
}
