package org.sweeptally.site;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.FileSystemException;
import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.Optional;
import org.sweeptally.site.Node.Position;

/** Files that settings are in: one, and others that it names, relative to itself. */
final class SiteFiles {

    private final Path site;
    private final Faults faults;

    /** @param site the site file; null for settings that stand alone */
    SiteFiles(Path site, Faults faults) {
        this.site = site;
        this.faults = faults;
    }

    /** A file beside the site file, read as GeoJSON; empty with a fault where that fails. */
    Optional<Node> geoJson(String name, Position namedAt) {
        if (site == null) {
            faults.add(namedAt, Node.plain(name), "must be written out here: these settings stand alone");
            return Optional.empty();
        }
        try {
            Path path = site.resolveSibling(name);
            return text(path, namedAt).flatMap(text -> TreeReader.json(path.toString(), text, faults));
        } catch (InvalidPathException e) {
            faults.add(namedAt, Node.plain(name), "must be the name of a file");
            return Optional.empty();
        }
    }

    /** The text of a file; empty with a fault at the given position where it cannot be read. */
    Optional<String> text(Path path, Position namedAt) {
        String which = path.toString().equals(namedAt.file()) ? "" : "the file " + path + " ";
        try {
            byte[] bytes = Files.readAllBytes(path);
            return Optional.of(StandardCharsets.UTF_8.newDecoder().decode(ByteBuffer.wrap(bytes)).toString());
        } catch (NoSuchFileException e) {
            faults.add(namedAt, "", which + "does not exist");
        } catch (CharacterCodingException e) {
            faults.add(namedAt, "", which + "must be text in UTF-8");
        } catch (FileSystemException e) {
            faults.add(namedAt, "", which + "cannot be read: " + e.getReason());
        } catch (IOException e) {
            faults.add(namedAt, "", which + "cannot be read: " + e.getMessage());
        }
        return Optional.empty();
    }
}
