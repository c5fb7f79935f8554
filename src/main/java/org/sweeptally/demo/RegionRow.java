package org.sweeptally.demo;

/**
 * What a subscriber saw of one region, and how far it was from the truth.
 *
 * @param scans                     scans that took effect
 * @param detections                detections that the region heard, in its core or its apron
 * @param rejects                   parts of which the region could not use something
 * @param births                    objects that came into the picture
 * @param ends                      objects that left it
 * @param objectsNow                objects shown after the last scan
 * @param expectedNumber            expected number after the last scan, of objects that some sensor has detected
 * @param least                     the lower end of the interval that holds that number with 90 % or more
 * @param most                      its upper end
 * @param trueNumber                how many really were in the region then
 * @param scoredScans               scans of sensors that cover the whole region, at which the picture was scored
 * @param ospaMetres                mean OSPA distance of the picture from the truth at those scans
 * @param ospaAtFaceValueMetres     the same of the scan's detections, each taken for an object
 */
public record RegionRow(
        String region,
        long scans,
        long detections,
        long rejects,
        long births,
        long ends,
        int objectsNow,
        double expectedNumber,
        int least,
        int most,
        int trueNumber,
        long scoredScans,
        double ospaMetres,
        double ospaAtFaceValueMetres) {}
