import { keepPreviousData, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { draftCalibration, listCalibrations, type CalibrationDraft } from '#contract/models.ts';
import { ring, setRing, stabilityMap, type RingToScenario } from '#contract/rings.ts';
import { call } from '../../api/call.ts';
import type { RingStudy } from './ring-study.ts';

type Ring = Pick<RingStudy, 'maxWindMs' | 'radiusKm' | 'width' | 'eye' | 'hoursInland'>;

/** The last answer stays while the next one is on its way. */
export const ringQuery = ({ maxWindMs, radiusKm, width, eye, hoursInland }: Ring) =>
  queryOptions({
    queryKey: ['rings', 'one', maxWindMs, radiusKm, width, eye, hoursInland],
    queryFn: ({ signal }) =>
      call(ring, {
        body: {
          maxWindMs,
          radiusOfMaxWindM: radiusKm * 1000,
          ringWidthFraction: width,
          eyeVorticityRatio: eye,
          hoursInland,
        },
        signal,
      }),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    refetchOnWindowFocus: false,
  });

export const stabilityMapQuery = () =>
  queryOptions({
    queryKey: ['rings', 'map'],
    queryFn: ({ signal }) => call(stabilityMap, { signal }),
    staleTime: Infinity,
    refetchOnWindowFocus: false,
  });

export const calibrationsQuery = () =>
  queryOptions({
    queryKey: ['calibrations', 'list'],
    queryFn: ({ signal }) => call(listCalibrations, { signal }),
  });

export const useSaveRing = () => {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ scenarioId, body, key }: { scenarioId: string; body: RingToScenario; key: string }) =>
      call(setRing, { params: { scenarioId }, body, idempotencyKey: key }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['scenarios'] }),
  });
};

export const useDraftCalibration = () => {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ body, key }: { body: CalibrationDraft; key: string }) =>
      call(draftCalibration, { body, idempotencyKey: key }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['calibrations'] }),
  });
};
