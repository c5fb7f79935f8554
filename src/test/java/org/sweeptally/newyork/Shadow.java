package org.sweeptally.newyork;

import java.util.List;
import java.util.stream.Collectors;
import java.util.stream.Stream;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;

/** What an island hides from the radar: whatever lies behind one of its shores. */
final class Shadow {

    /** Nothing is hidden. */
    static final Shadow NONE = new Shadow(List.of());

    /** Liberty Island, roughly, by hand. */
    static final Shadow LIBERTY_ISLAND = new Shadow(List.of(
            new LatLon(40.6905, -74.0465), new LatLon(40.6900, -74.0440), new LatLon(40.6885, -74.0435),
            new LatLon(40.6880, -74.0455), new LatLon(40.6890, -74.0475)));

    private final List<LatLon> corners;
    private final List<PlanePoint> shore;

    private Shadow(List<LatLon> corners) {
        LocalPlane plane = new LocalPlane(SimulatedRadar.PLACE);
        this.corners = corners;
        this.shore = corners.stream().map(plane::toPlane).toList();
    }

    /** The island as a site file names it, among a sensor's obstacles. */
    String polygon() {
        String ring = Stream.concat(corners.stream(), Stream.of(corners.get(0)))
                .map(corner -> "[" + corner.longitude() + ", " + corner.latitude() + "]")
                .collect(Collectors.joining(", "));
        return "[[" + ring + "]]";
    }

    /** Whether the line of sight from the radar, at the plane's origin, to a place crosses the shore. */
    boolean hides(double east, double north) {
        for (int i = 0; i < shore.size(); i++) {
            PlanePoint a = shore.get(i);
            PlanePoint b = shore.get((i + 1) % shore.size());
            double sideA = east * a.northMetres() - north * a.eastMetres();
            double sideB = east * b.northMetres() - north * b.eastMetres();
            double edgeEast = b.eastMetres() - a.eastMetres();
            double edgeNorth = b.northMetres() - a.northMetres();
            double radar = edgeNorth * a.eastMetres() - edgeEast * a.northMetres();
            double place = edgeNorth * (a.eastMetres() - east) - edgeEast * (a.northMetres() - north);
            if (sideA * sideB < 0 && radar * place < 0) {
                return true;
            }
        }
        return false;
    }
}
