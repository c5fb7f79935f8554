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
        Published published = new Published();
        LocalSite local = new LocalSite(site, published::outputsOf);
        PartDecoder decoder = new PartDecoder(site);
        for (int i = 0; i < parts.size(); i++) {
            SourcePosition source = new SourcePosition(0, i);
            Intake intake = decoder.decode(Wire.encode(parts.get(i)), Optional.of(source));
            intake.body().ifPresent(body -> local.part(body, source));
        }
        return published;
    }
}
