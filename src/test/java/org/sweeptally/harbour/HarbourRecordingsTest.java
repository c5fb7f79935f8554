package org.sweeptally.harbour;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.harbour.HarbourRecordings.Order;

/** Rows to parts, on a recording of our own that fits on a screen. */
class HarbourRecordingsTest {

    @TempDir
    private Path folder;

    @BeforeEach
    void recording() throws IOException {
        Files.writeString(folder.resolve("scans.csv"), """
                scenario,sensor,scan_no,t_seconds,own_north_m,own_east_m,n_detections,arrival_no
                2,radar,0,1.184,0.0,0.0,2,2
                2,lidar,0,1.184,0.0,0.0,0,1
                2,lidar,1,1.689,1.0,-1.0,1,0
                4,radar,0,0.5,0.0,0.0,0,0
                """);
        Files.writeString(folder.resolve("detections.csv"), """
                scenario,sensor,scan_no,t_seconds,rel_north_m,rel_east_m
                2,radar,0,1.184,-142.62,-218.25
                2,lidar,1,1.689,3.5,2.5
                2,radar,0,1.184,102.77,38.91
                """);
        Files.writeString(folder.resolve("truth.csv"), """
                scenario,t_seconds,object_id,north_m,east_m
                2,0.031,1,84.64,-354.80
                2,0.151,1,84.41,-355.10
                4,0.0,2,1,2
                """);
    }

    @Test
    void aScanIsOneClosingPartWithItsDetectionsInOrder() throws IOException {
        assertThat(new HarbourRecordings(folder).parts(2, List.of("radar"), Order.TIME)).containsExactly(
                "{\"sensor\":\"radar\",\"scan\":0,\"scanTime\":\"2021-05-04T06:00:01.184Z\",\"part\":0,"
                        + "\"closesScan\":true,"
                        + "\"sensorPosition\":{\"latitude\":63.438902908,\"longitude\":10.39908278},\"detections\":["
                        + "{\"id\":\"r0-0\",\"eastMetres\":-218.25,\"northMetres\":-142.62},"
                        + "{\"id\":\"r0-1\",\"eastMetres\":38.91,\"northMetres\":102.77}]}");
    }

    @Test
    void orderIsByTimeAndSensorOrAsDelivered() throws IOException {
        HarbourRecordings recordings = new HarbourRecordings(folder);
        List<String> byTime = recordings.parts(2, List.of("radar", "lidar"), Order.TIME);
        List<String> asDelivered = recordings.parts(2, List.of("radar", "lidar"), Order.ARRIVAL);
        assertThat(byTime).hasSize(3);
        assertThat(asDelivered).containsExactly(byTime.get(2), byTime.get(0), byTime.get(1));
        assertThat(byTime.get(0)).contains("\"sensor\":\"lidar\",\"scan\":0").contains("\"detections\":[]");
    }

    @Test
    void truthAndScanTimesAreOfOneScenario() throws IOException {
        HarbourRecordings recordings = new HarbourRecordings(folder);
        assertThat(recordings.truth(2)).containsOnlyKeys("1");
        assertThat(recordings.truth(2).get("1"))
                .hasSize(2)
                .contains(new HarbourRecordings.Truth(0.031, -354.80, 84.64));
        assertThat(recordings.scanSeconds(2, "lidar")).containsEntry(0, 1.184).containsEntry(1, 1.689).hasSize(2);
    }
}
