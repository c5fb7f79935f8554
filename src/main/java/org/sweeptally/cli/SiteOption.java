package org.sweeptally.cli;

import java.io.PrintStream;
import java.nio.file.Path;
import java.util.Optional;
import org.sweeptally.site.Fault;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;
import picocli.CommandLine.Option;

/** The option that names the site file. */
final class SiteOption {

    @Option(
            names = "--site",
            required = true,
            paramLabel = "FILE",
            description = "The site file (YAML): sensors, regions, motion, thresholds.")
    private Path file;

    Optional<Site> read(PrintStream err) {
        return read(file, err);
    }

    /** The site, or nothing after every fault of the file was printed on a line of its own. */
    static Optional<Site> read(Path file, PrintStream err) {
        SiteResult result = SiteReader.read(file);
        if (result instanceof SiteResult.Faulty faulty) {
            faulty.faults().forEach((Fault fault) -> err.println(fault));
            return Optional.empty();
        }
        return Optional.of(((SiteResult.Valid) result).site());
    }
}
