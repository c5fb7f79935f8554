package org.sweeptally.region;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.event.Detection;
import org.sweeptally.event.Digest;
import org.sweeptally.event.EndOfInputBody;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.PassedOverWhy;
import org.sweeptally.event.ProgressMarkBody;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.event.SilentBody;
import org.sweeptally.event.TickBody;
import org.sweeptally.geo.LatLon;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** Makes entries of a region's log. Times are in seconds since the beginning of the tests' day. */
final class Entries {

    /** 2031-05-01T04:00:00Z. */
    static final long DAY = 1_935_374_400_000_000L;

    private Entries() {}

    static long micros(double seconds) {
        return DAY + Math.round(seconds * 1e6);
    }

    /** A part in the making. */
    static final class PartMaker {
        private final Part.Builder part;
        private final List<Detection> detections = new ArrayList<>();
        private boolean unusable;

        private PartMaker(String sensor, double scanSeconds) {
            part = Part.newBuilder().setSensor(sensor).setScanTimeMicros(micros(scanSeconds)).setClosesScan(true);
        }

        PartMaker part(int number) {
            part.setPart(number);
            return this;
        }

        PartMaker scan(long number) {
            part.setScan(number);
            return this;
        }

        PartMaker open() {
            part.setClosesScan(false);
            return this;
        }

        PartMaker unusable() {
            unusable = true;
            return this;
        }

        PartMaker nothingBefore(double seconds) {
            part.setPromise(new SensorPromise(micros(seconds)));
            return this;
        }

        PartMaker nothingEver() {
            part.setPromise(new SensorPromise(null));
            return this;
        }

        PartMaker from(LatLon place) {
            part.setSensorPosition(new GeoPoint(place.latitude(), place.longitude(), null));
            return this;
        }

        PartMaker sees(double east, double north) {
            return sees(detections.size(), TestSites.at(east, north));
        }

        PartMaker sees(int index, LatLon place) {
            return sees(Detection.newBuilder()
                    .setIndex(index)
                    .setId("d" + index)
                    .setMeasurement(new GeodeticFix(place.latitude(), place.longitude()))
                    .build());
        }

        PartMaker seesOffset(double east, double north) {
            return sees(Detection.newBuilder()
                    .setIndex(detections.size())
                    .setMeasurement(new OffsetFix(east, north))
                    .build());
        }

        PartMaker sees(Detection detection) {
            detections.add(detection);
            return this;
        }

        LogEntry entry() {
            Part made = part.setDetections(detections).build();
            return LogEntry.newBuilder()
                    .setSender(made.getSensor())
                    .setSourcePartition(0)
                    .setSourceOffset(7L)
                    .setBody(new PartBody(made, detections.size(), unusable, digest(made)))
                    .build();
        }
    }

    /** A closing part 0, unless it is told otherwise. */
    static PartMaker part(String sensor, double scanSeconds) {
        return new PartMaker(sensor, scanSeconds);
    }

    static Digest digest(Part part) {
        return Wire.digest(part);
    }

    static LogEntry settings(String text, Site site) {
        return settings(text, site, null);
    }

    static LogEntry settings(String text, Site site, Double fromSeconds) {
        return LogEntry.newBuilder()
                .setSender("operator")
                .setLogTimeMicros(fromSeconds == null ? null : Long.valueOf(micros(fromSeconds)))
                .setBody(new SettingsBody(text, site.revision(), RegionMachine.MACHINE_VERSION))
                .build();
    }

    static LogEntry tick(double wallSeconds) {
        return operator(new TickBody(micros(wallSeconds)));
    }

    static LogEntry mark(int partition, int partitions, double wallSeconds) {
        return operator(new ProgressMarkBody(partition, partitions, micros(wallSeconds)));
    }

    static LogEntry silent(String sensor) {
        return operator(new SilentBody(sensor, PassedOverWhy.SILENT));
    }

    static LogEntry endOfInput() {
        return operator(new EndOfInputBody());
    }

    private static LogEntry operator(Object body) {
        return LogEntry.newBuilder().setSender("operator").setBody(body).build();
    }
}
