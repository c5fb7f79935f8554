package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;

/**
 * Reads the coordinates of an RFC 7946 Polygon: rings of [longitude, latitude] positions, the outer one first, each
 * ending where it starts.
 */
final class PolygonReader {

    private static final int LEAST_POSITIONS = 4;

    private final Faults faults;

    PolygonReader(Faults faults) {
        this.faults = faults;
    }

    /** The polygon; empty, with faults, where it is none or not a valid one. */
    Optional<GeoPolygon> read(Node node) {
        if (!(node instanceof Node.Sequence rings) || rings.items().isEmpty()) {
            faults.add(node.at(), node.shown(), "must be a list of rings, each a list of [longitude, latitude]");
            return Optional.empty();
        }
        List<List<LatLon>> corners = new ArrayList<>();
        for (Node ring : rings.items()) {
            ring(ring).ifPresent(corners::add);
        }
        if (corners.size() < rings.items().size()) {
            return Optional.empty();
        }
        GeoPolygon polygon = new GeoPolygon(corners.get(0), corners.subList(1, corners.size()));
        Optional<String> wrong = PolygonShape.faultOf(polygon);
        wrong.ifPresent(sentence -> faults.add(node.at(), "", sentence));
        return wrong.isPresent() ? Optional.empty() : Optional.of(polygon);
    }

    private Optional<List<LatLon>> ring(Node node) {
        if (!(node instanceof Node.Sequence ring)) {
            faults.add(node.at(), node.shown(), "must be a ring, a list of [longitude, latitude]");
            return Optional.empty();
        }
        List<LatLon> corners = new ArrayList<>();
        for (Node item : ring.items()) {
            position(item).ifPresent(corners::add);
        }
        if (corners.size() < ring.items().size()) {
            return Optional.empty();
        }
        if (corners.isEmpty() || !corners.get(0).equals(corners.get(corners.size() - 1))) {
            faults.add(node.at(), "", "the ring is not closed, its last position must repeat its first");
            return Optional.empty();
        }
        if (corners.size() < LEAST_POSITIONS) {
            faults.add(node.at(), "", "the ring has " + (corners.size() - 1) + " corners, must have at least 3");
            return Optional.empty();
        }
        return Optional.of(corners);
    }

    /** A height after longitude and latitude is allowed and not used. */
    private Optional<LatLon> position(Node node) {
        if (!(node instanceof Node.Sequence position) || position.items().size() < 2 || position.items().size() > 3) {
            faults.add(node.at(), node.shown(), "must be [longitude, latitude]");
            return Optional.empty();
        }
        double longitude = Fields.number(position.items().get(0), Allowed.LONGITUDE, faults);
        double latitude = Fields.number(position.items().get(1), Allowed.LATITUDE, faults);
        return Double.isNaN(longitude) || Double.isNaN(latitude)
                ? Optional.empty()
                : Optional.of(new LatLon(latitude, longitude));
    }
}
