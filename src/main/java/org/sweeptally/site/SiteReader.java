package org.sweeptally.site;

import java.nio.file.Path;
import java.util.Optional;
import org.sweeptally.site.Node.Position;

/**
 * Reads a site's settings: a YAML file, with its regions in a GeoJSON file (RFC 7946) beside it or written out in it.
 * Everything that is wrong is found at once. A number must be finite; a key that is not known is a fault, since a slip
 * in a key would leave a default standing without a word.
 */
public final class SiteReader {

    private SiteReader() {}

    /** Reads the site file and the files that it names, relative to itself. */
    public static SiteResult read(Path siteFile) {
        Faults faults = new Faults();
        faults.beginFile(siteFile.toString());
        SiteFiles files = new SiteFiles(siteFile, faults);
        return files.text(siteFile, new Position(siteFile.toString(), 0, ""))
                .map(text -> read(siteFile.toString(), text, files, faults))
                .orElseGet(() -> new SiteResult.Faulty(faults.sorted()));
    }

    /**
     * Reads settings that stand alone, their polygons written out in them, such as {@link EffectiveSettings#text}
     * makes. Their faults name the file "settings".
     */
    public static SiteResult readText(String text) {
        Faults faults = new Faults();
        return read("settings", text, new SiteFiles(null, faults), faults);
    }

    private static SiteResult read(String name, String text, SiteFiles files, Faults faults) {
        Optional<Site> site =
                TreeReader.yaml(name, text, faults).map(node -> new SiteAssembly(files, faults).assemble(node));
        return site.isPresent() && faults.isEmpty()
                ? new SiteResult.Valid(site.get())
                : new SiteResult.Faulty(faults.sorted());
    }
}
