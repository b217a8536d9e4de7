// Code generated from the schema by TestTheQuickLookIsThatOfTheSchema. DO NOT EDIT.

package server

import (
	"unicode/utf8"

	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// looksFine reports that every value of a request is within what the schema allows. Of a message that it does not know, or
// where anything is wrong, it is false: the door then says what.
func looksFine(m proto.Message) bool {
	switch m := m.(type) {
	case *pb.FitRequest:
		return fineFitRequest(m)
	case *pb.FitPairRequest:
		return fineFitPairRequest(m)
	case *pb.FitStreamRequest:
		return fineFitStreamRequest(m)
	case *pb.ResolveTrialRequest:
		return fineResolveTrialRequest(m)
	case *pb.TransferVertexRequest:
		return fineTransferVertexRequest(m)
	case *pb.CombineRequest:
		return fineCombineRequest(m)
	case *pb.ExpressRequest:
		return fineExpressRequest(m)
	case *pb.CompareCorrectionsRequest:
		return fineCompareCorrectionsRequest(m)
	case *pb.DescribeCorneaRequest:
		return fineDescribeCorneaRequest(m)
	case *pb.ListCautionsRequest:
		return fineListCautionsRequest(m)
	case *pb.ListMethodsRequest:
		return fineListMethodsRequest(m)
	case *pb.DesignLensRequest:
		return fineDesignLensRequest(m)
	case *pb.VerifyLensRequest:
		return fineVerifyLensRequest(m)
	case *pb.ListSeriesRequest:
		return fineListSeriesRequest(m)
	case *pb.RankLensesRequest:
		return fineRankLensesRequest(m)
	case *pb.CheckOrderRequest:
		return fineCheckOrderRequest(m)
	case *pb.DrawFitRequest:
		return fineDrawFitRequest(m)
	case *pb.DrawLensRequest:
		return fineDrawLensRequest(m)
	}
	return false
}

func fineFitRequest(m *pb.FitRequest) bool {
	if m.HasEye() {
		if x := m.GetEye(); !fineEye(x) {
			return false
		}
	}
	if m.HasLens() {
		if x := m.GetLens(); !fineLens(x) {
			return false
		}
	}
	if m.HasPlan() {
		if x := m.GetPlan(); !fineFitPlan(x) {
			return false
		}
	}
	return true
}

func fineEye(m *pb.Eye) bool {
	if m.HasSide() {
		if x := m.GetSide(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	if m.HasRefraction() {
		if x := m.GetRefraction(); !fineRefraction(x) {
			return false
		}
	}
	if m.HasKeratometry() {
		if x := m.GetKeratometry(); !fineKeratometry(x) {
			return false
		}
	}
	if m.HasCorneaShape() {
		if x := m.GetCorneaShape(); !fineCorneaShape(x) {
			return false
		}
	}
	if m.HasIrisDiameterMm() {
		if x := m.GetIrisDiameterMm(); !(x >= 8 && x <= 15) {
			return false
		}
	}
	if m.HasPupilDiameterMm() {
		if x := m.GetPupilDiameterMm(); !(x >= 1 && x <= 10) {
			return false
		}
	}
	if m.HasAxialLengthMm() {
		if x := m.GetAxialLengthMm(); !(x >= 15 && x <= 40) {
			return false
		}
	}
	return true
}

func fineRefraction(m *pb.Refraction) bool {
	if m.HasSphereD() {
		if x := m.GetSphereD(); !(x >= -40 && x <= 30) {
			return false
		}
	}
	if m.HasCylinderD() {
		if x := m.GetCylinderD(); !(x >= -12 && x <= 12) {
			return false
		}
	}
	if m.HasAxisDeg() {
		if x := m.GetAxisDeg(); !(x >= 0 && x <= 180) {
			return false
		}
	}
	if m.HasVertexDistanceMm() {
		if x := m.GetVertexDistanceMm(); !(x >= 0 && x <= 20) {
			return false
		}
	}
	if m.HasAddD() {
		if x := m.GetAddD(); !(x >= 0 && x <= 5) {
			return false
		}
	}
	return true
}

func fineKeratometry(m *pb.Keratometry) bool {
	if m.HasFlat() {
		if x := m.GetFlat(); !fineMeridianReading(x) {
			return false
		}
	}
	if m.HasSteep() {
		if x := m.GetSteep(); !fineMeridianReading(x) {
			return false
		}
	}
	if m.HasKeratometricIndex() {
		if x := m.GetKeratometricIndex(); !(x >= 1.31 && x <= 1.38) {
			return false
		}
	}
	return true
}

func fineMeridianReading(m *pb.MeridianReading) bool {
	if m.HasRadiusMm() {
		if x := m.GetRadiusMm(); !(x >= 4.5 && x <= 11) {
			return false
		}
	}
	if m.HasPowerD() {
		if x := m.GetPowerD(); !(x >= 28 && x <= 75) {
			return false
		}
	}
	if m.HasMeridianDeg() {
		if x := m.GetMeridianDeg(); !(x >= 0 && x <= 180) {
			return false
		}
	}
	if m.HasAuxiliaryLensD() {
		if x := m.GetAuxiliaryLensD(); !(x >= -1 && x <= 1.25) {
			return false
		}
	}
	return true
}

func fineCorneaShape(m *pb.CorneaShape) bool {
	if m.HasEccentricity() {
		if x := m.GetEccentricity(); !(x >= 0 && x <= 1) {
			return false
		}
	}
	if m.HasShapeFactorP() {
		if x := m.GetShapeFactorP(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	if m.HasAsphericityQ() {
		if x := m.GetAsphericityQ(); !(x >= -1 && x <= 1) {
			return false
		}
	}
	return true
}

func fineLens(m *pb.Lens) bool {
	if m.HasKind() {
		if x := m.GetKind(); !(x >= 0 && x <= 3) {
			return false
		}
	}
	if m.HasToricity() {
		if x := m.GetToricity(); !(x >= 0 && x <= 4) {
			return false
		}
	}
	if m.HasBackSurface() {
		if x := m.GetBackSurface(); !fineBackSurface(x) {
			return false
		}
	}
	if m.HasFrontSurface() {
		if x := m.GetFrontSurface(); !fineFrontSurface(x) {
			return false
		}
	}
	if m.HasTotalDiameterMm() {
		if x := m.GetTotalDiameterMm(); !(x >= 6 && x <= 25) {
			return false
		}
	}
	if m.HasCentreThicknessMm() {
		if x := m.GetCentreThicknessMm(); !(x >= 0.02 && x <= 2) {
			return false
		}
	}
	if m.HasMaterial() {
		if x := m.GetMaterial(); !fineMaterial(x) {
			return false
		}
	}
	if m.HasPower() {
		if x := m.GetPower(); !fineSphereCylinder(x) {
			return false
		}
	}
	if m.HasAddD() {
		if x := m.GetAddD(); !(x >= 0 && x <= 5) {
			return false
		}
	}
	if m.HasPrismPd() {
		if x := m.GetPrismPd(); !(x >= 0 && x <= 6) {
			return false
		}
	}
	return true
}

func fineBackSurface(m *pb.BackSurface) bool {
	if m.HasOpticZoneRadiusMm() {
		if x := m.GetOpticZoneRadiusMm(); !(x >= 4 && x <= 14) {
			return false
		}
	}
	if m.HasSteepRadiusMm() {
		if x := m.GetSteepRadiusMm(); !(x >= 4 && x <= 14) {
			return false
		}
	}
	if m.HasFlatMeridianDeg() {
		if x := m.GetFlatMeridianDeg(); !(x >= 0 && x <= 180) {
			return false
		}
	}
	if m.HasOpticZoneDiameterMm() {
		if x := m.GetOpticZoneDiameterMm(); !(x >= 3 && x <= 16) {
			return false
		}
	}
	if m.HasOpticZoneShape() {
		if x := m.GetOpticZoneShape(); !fineCorneaShape(x) {
			return false
		}
	}
	if len(m.GetPeripheralZones()) > mostItems {
		return false
	}
	for _, x := range m.GetPeripheralZones() {
		if !fineZone(x) {
			return false
		}
	}
	return true
}

func fineZone(m *pb.Zone) bool {
	if m.HasRadiusMm() {
		if x := m.GetRadiusMm(); !(x >= 4 && x <= 30) {
			return false
		}
	}
	if m.HasOuterDiameterMm() {
		if x := m.GetOuterDiameterMm(); !(x >= 4 && x <= 25) {
			return false
		}
	}
	return true
}

func fineFrontSurface(m *pb.FrontSurface) bool {
	if m.HasOpticZoneRadiusMm() {
		if x := m.GetOpticZoneRadiusMm(); !(x >= 3 && x <= 100) {
			return false
		}
	}
	if m.HasSteepRadiusMm() {
		if x := m.GetSteepRadiusMm(); !(x >= 3 && x <= 100) {
			return false
		}
	}
	if m.HasFlatMeridianDeg() {
		if x := m.GetFlatMeridianDeg(); !(x >= 0 && x <= 180) {
			return false
		}
	}
	if m.HasOpticZoneDiameterMm() {
		if x := m.GetOpticZoneDiameterMm(); !(x >= 3 && x <= 16) {
			return false
		}
	}
	if m.HasCarrierRadiusMm() {
		if x := m.GetCarrierRadiusMm(); !(x >= 3 && x <= 100) {
			return false
		}
	}
	return true
}

func fineMaterial(m *pb.Material) bool {
	if m.HasRefractiveIndex() {
		if x := m.GetRefractiveIndex(); !(x >= 1.35 && x <= 1.7) {
			return false
		}
	}
	if m.HasDk() {
		if x := m.GetDk(); !(x >= 0 && x <= 400) {
			return false
		}
	}
	if m.HasDensityGCm3() {
		if x := m.GetDensityGCm3(); !(x >= 0.8 && x <= 1.6) {
			return false
		}
	}
	if m.HasName() {
		if x := m.GetName(); utf8.RuneCountInString(x) > longest {
			return false
		}
	}
	return true
}

func fineSphereCylinder(m *pb.SphereCylinder) bool {
	if m.HasSphereD() {
		if x := m.GetSphereD(); !(x >= -100 && x <= 100) {
			return false
		}
	}
	if m.HasCylinderD() {
		if x := m.GetCylinderD(); !(x >= -50 && x <= 50) {
			return false
		}
	}
	if m.HasAxisDeg() {
		if x := m.GetAxisDeg(); !(x >= 0 && x <= 180) {
			return false
		}
	}
	return true
}

func fineFitPlan(m *pb.FitPlan) bool {
	if m.HasToricity() {
		if x := m.GetToricity(); !(x >= 0 && x <= 4) {
			return false
		}
	}
	if m.HasBackCurveRule() {
		if x := m.GetBackCurveRule(); !(x >= 0 && x <= 4) {
			return false
		}
	}
	if m.HasBackCurveOffsetD() {
		if x := m.GetBackCurveOffsetD(); !(x >= -3 && x <= 3) {
			return false
		}
	}
	if m.HasWantedApexClearanceUm() {
		if x := m.GetWantedApexClearanceUm(); !(x >= 0 && x <= 500) {
			return false
		}
	}
	if m.HasPowerStepD() {
		if x := m.GetPowerStepD(); !(x >= 0.01 && x <= 1) {
			return false
		}
	}
	if m.HasCylinderStepD() {
		if x := m.GetCylinderStepD(); !(x >= 0.01 && x <= 1) {
			return false
		}
	}
	if m.HasAxisStepDeg() {
		if x := m.GetAxisStepDeg(); !(x >= 1 && x <= 90) {
			return false
		}
	}
	if m.HasRadiusStepMm() {
		if x := m.GetRadiusStepMm(); !(x >= 0.01 && x <= 0.5) {
			return false
		}
	}
	if m.HasWear() {
		if x := m.GetWear(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	if m.HasTearIndex() {
		if x := m.GetTearIndex(); !(x >= 1.33 && x <= 1.34) {
			return false
		}
	}
	if m.HasApexClearanceUm() {
		if x := m.GetApexClearanceUm(); !(x >= 0 && x <= 1000) {
			return false
		}
	}
	if m.HasCylinderForm() {
		if x := m.GetCylinderForm(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	if m.HasUncertainties() {
		if x := m.GetUncertainties(); !fineUncertainties(x) {
			return false
		}
	}
	return true
}

func fineUncertainties(m *pb.Uncertainties) bool {
	if m.HasRefractionD() {
		if x := m.GetRefractionD(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	if m.HasKeratometryD() {
		if x := m.GetKeratometryD(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	if m.HasVertexDistanceMm() {
		if x := m.GetVertexDistanceMm(); !(x >= 0 && x <= 5) {
			return false
		}
	}
	if m.HasBackOpticZoneRadiusMm() {
		if x := m.GetBackOpticZoneRadiusMm(); !(x >= 0 && x <= 0.5) {
			return false
		}
	}
	if m.HasPowerD() {
		if x := m.GetPowerD(); !(x >= 0 && x <= 1) {
			return false
		}
	}
	if m.HasCentreThicknessMm() {
		if x := m.GetCentreThicknessMm(); !(x >= 0 && x <= 0.2) {
			return false
		}
	}
	return true
}

func fineFitPairRequest(m *pb.FitPairRequest) bool {
	if m.HasRight() {
		if x := m.GetRight(); !fineFitRequest(x) {
			return false
		}
	}
	if m.HasLeft() {
		if x := m.GetLeft(); !fineFitRequest(x) {
			return false
		}
	}
	return true
}

func fineFitStreamRequest(m *pb.FitStreamRequest) bool {
	if len(m.GetItems()) > mostItems {
		return false
	}
	for _, x := range m.GetItems() {
		if !fineFitStreamItem(x) {
			return false
		}
	}
	return true
}

func fineFitStreamItem(m *pb.FitStreamItem) bool {
	if m.HasId() {
		if x := m.GetId(); utf8.RuneCountInString(x) > longest {
			return false
		}
	}
	if m.HasRequest() {
		if x := m.GetRequest(); !fineFitRequest(x) {
			return false
		}
	}
	return true
}

func fineResolveTrialRequest(m *pb.ResolveTrialRequest) bool {
	if m.HasTrial() {
		if x := m.GetTrial(); !fineLens(x) {
			return false
		}
	}
	if m.HasRotationDeg() {
		if x := m.GetRotationDeg(); !(x >= -180 && x <= 180) {
			return false
		}
	}
	if m.HasOverRefraction() {
		if x := m.GetOverRefraction(); !fineRefraction(x) {
			return false
		}
	}
	if m.HasEye() {
		if x := m.GetEye(); !fineEye(x) {
			return false
		}
	}
	if m.HasOrder() {
		if x := m.GetOrder(); !fineLens(x) {
			return false
		}
	}
	if m.HasPlan() {
		if x := m.GetPlan(); !fineFitPlan(x) {
			return false
		}
	}
	return true
}

func fineTransferVertexRequest(m *pb.TransferVertexRequest) bool {
	if m.HasRefraction() {
		if x := m.GetRefraction(); !fineRefraction(x) {
			return false
		}
	}
	if m.HasToVertexDistanceMm() {
		if x := m.GetToVertexDistanceMm(); !(x >= 0 && x <= 20) {
			return false
		}
	}
	if m.HasCylinderForm() {
		if x := m.GetCylinderForm(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	return true
}

func fineCombineRequest(m *pb.CombineRequest) bool {
	if len(m.GetTerms()) > mostItems {
		return false
	}
	for _, x := range m.GetTerms() {
		if !fineTerm(x) {
			return false
		}
	}
	if m.HasCylinderForm() {
		if x := m.GetCylinderForm(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	return true
}

func fineTerm(m *pb.Term) bool {
	if m.HasSphereCylinder() {
		if x := m.GetSphereCylinder(); !fineSphereCylinder(x) {
			return false
		}
	}
	if m.HasPowerVector() {
		if x := m.GetPowerVector(); !finePowerVector(x) {
			return false
		}
	}
	return true
}

func finePowerVector(m *pb.PowerVector) bool {
	if m.HasMeanD() {
		if x := m.GetMeanD(); !(x >= -100 && x <= 100) {
			return false
		}
	}
	if m.HasJ0D() {
		if x := m.GetJ0D(); !(x >= -25 && x <= 25) {
			return false
		}
	}
	if m.HasJ45D() {
		if x := m.GetJ45D(); !(x >= -25 && x <= 25) {
			return false
		}
	}
	return true
}

func fineExpressRequest(m *pb.ExpressRequest) bool {
	if m.HasSphereCylinder() {
		if x := m.GetSphereCylinder(); !fineSphereCylinder(x) {
			return false
		}
	}
	if m.HasPowerVector() {
		if x := m.GetPowerVector(); !finePowerVector(x) {
			return false
		}
	}
	if m.HasRotationDeg() {
		if x := m.GetRotationDeg(); !(x >= -180 && x <= 180) {
			return false
		}
	}
	return true
}

func fineCompareCorrectionsRequest(m *pb.CompareCorrectionsRequest) bool {
	if m.HasRefraction() {
		if x := m.GetRefraction(); !fineRefraction(x) {
			return false
		}
	}
	if m.HasLens() {
		if x := m.GetLens(); !fineLens(x) {
			return false
		}
	}
	if m.HasNearDistanceMm() {
		if x := m.GetNearDistanceMm(); !(x >= 100 && x <= 10000) {
			return false
		}
	}
	if m.HasSpectacleFrontPowerD() {
		if x := m.GetSpectacleFrontPowerD(); !(x >= 0 && x <= 30) {
			return false
		}
	}
	if m.HasSpectacleThicknessMm() {
		if x := m.GetSpectacleThicknessMm(); !(x >= 0.5 && x <= 20) {
			return false
		}
	}
	if m.HasSpectacleIndex() {
		if x := m.GetSpectacleIndex(); !(x >= 1.4 && x <= 2) {
			return false
		}
	}
	return true
}

func fineDescribeCorneaRequest(m *pb.DescribeCorneaRequest) bool {
	if m.HasKeratometry() {
		if x := m.GetKeratometry(); !fineKeratometry(x) {
			return false
		}
	}
	if m.HasCorneaShape() {
		if x := m.GetCorneaShape(); !fineCorneaShape(x) {
			return false
		}
	}
	if len(m.GetChordsMm()) > mostItems {
		return false
	}
	for _, x := range m.GetChordsMm() {
		if !(x >= 1 && x <= 11.5) {
			return false
		}
	}
	return true
}

func fineListCautionsRequest(m *pb.ListCautionsRequest) bool {
	return true
}

func fineListMethodsRequest(m *pb.ListMethodsRequest) bool {
	return true
}

func fineDesignLensRequest(m *pb.DesignLensRequest) bool {
	if m.HasLens() {
		if x := m.GetLens(); !fineLens(x) {
			return false
		}
	}
	if m.HasPlan() {
		if x := m.GetPlan(); !fineDesignPlan(x) {
			return false
		}
	}
	return true
}

func fineDesignPlan(m *pb.DesignPlan) bool {
	if m.HasProfileSpacingMm() {
		if x := m.GetProfileSpacingMm(); !(x >= 0.01 && x <= 5) {
			return false
		}
	}
	if len(m.GetProfileMeridiansDeg()) > mostItems {
		return false
	}
	for _, x := range m.GetProfileMeridiansDeg() {
		if !(x >= 0 && x <= 180) {
			return false
		}
	}
	if m.HasEdgeThicknessMm() {
		if x := m.GetEdgeThicknessMm(); !(x >= 0.03 && x <= 0.5) {
			return false
		}
	}
	if m.HasRadiusStepMm() {
		if x := m.GetRadiusStepMm(); !(x >= 0.001 && x <= 0.5) {
			return false
		}
	}
	return true
}

func fineVerifyLensRequest(m *pb.VerifyLensRequest) bool {
	if m.HasOrdered() {
		if x := m.GetOrdered(); !fineLens(x) {
			return false
		}
	}
	if m.HasMeasured() {
		if x := m.GetMeasured(); !fineLens(x) {
			return false
		}
	}
	if len(m.GetTolerances()) > mostItems {
		return false
	}
	for _, x := range m.GetTolerances() {
		if !fineTolerance(x) {
			return false
		}
	}
	return true
}

func fineTolerance(m *pb.Tolerance) bool {
	if m.HasField() {
		if x := m.GetField(); utf8.RuneCountInString(x) > longest {
			return false
		}
	}
	if m.HasUnit() {
		if x := m.GetUnit(); utf8.RuneCountInString(x) > longest {
			return false
		}
	}
	if m.HasSource() {
		if x := m.GetSource(); utf8.RuneCountInString(x) > longest {
			return false
		}
	}
	return true
}

func fineListSeriesRequest(m *pb.ListSeriesRequest) bool {
	return true
}

func fineRankLensesRequest(m *pb.RankLensesRequest) bool {
	if m.HasEye() {
		if x := m.GetEye(); !fineEye(x) {
			return false
		}
	}
	if m.HasPlan() {
		if x := m.GetPlan(); !fineFitPlan(x) {
			return false
		}
	}
	if len(m.GetSeriesNames()) > mostItems {
		return false
	}
	for _, x := range m.GetSeriesNames() {
		if utf8.RuneCountInString(x) > longest {
			return false
		}
	}
	if len(m.GetSeries()) > mostItems {
		return false
	}
	for _, x := range m.GetSeries() {
		if !fineSeries(x) {
			return false
		}
	}
	if m.HasMost() {
		if x := m.GetMost(); !(x >= 1 && x <= 1000) {
			return false
		}
	}
	return true
}

func fineSeries(m *pb.Series) bool {
	if m.HasName() {
		if x := m.GetName(); utf8.RuneCountInString(x) > longest {
			return false
		}
	}
	if m.HasKind() {
		if x := m.GetKind(); !(x >= 0 && x <= 3) {
			return false
		}
	}
	if m.HasMaterial() {
		if x := m.GetMaterial(); !fineMaterial(x) {
			return false
		}
	}
	if len(m.GetBackOpticZoneRadii()) > mostItems {
		return false
	}
	for _, x := range m.GetBackOpticZoneRadii() {
		if !fineLengthRange(x) {
			return false
		}
	}
	if len(m.GetTotalDiameters()) > mostItems {
		return false
	}
	for _, x := range m.GetTotalDiameters() {
		if !fineLengthRange(x) {
			return false
		}
	}
	if len(m.GetSpheres()) > mostItems {
		return false
	}
	for _, x := range m.GetSpheres() {
		if !finePowerRange(x) {
			return false
		}
	}
	if len(m.GetCylinders()) > mostItems {
		return false
	}
	for _, x := range m.GetCylinders() {
		if !finePowerRange(x) {
			return false
		}
	}
	if len(m.GetAxes()) > mostItems {
		return false
	}
	for _, x := range m.GetAxes() {
		if !fineAxisRange(x) {
			return false
		}
	}
	if len(m.GetAdds()) > mostItems {
		return false
	}
	for _, x := range m.GetAdds() {
		if !finePowerRange(x) {
			return false
		}
	}
	return true
}

func fineLengthRange(m *pb.LengthRange) bool {
	if m.HasMinimumMm() {
		if x := m.GetMinimumMm(); !(x >= 3 && x <= 30) {
			return false
		}
	}
	if m.HasMaximumMm() {
		if x := m.GetMaximumMm(); !(x >= 3 && x <= 30) {
			return false
		}
	}
	if m.HasStepMm() {
		if x := m.GetStepMm(); !(x >= 0.01 && x <= 10) {
			return false
		}
	}
	return true
}

func finePowerRange(m *pb.PowerRange) bool {
	if m.HasMinimumD() {
		if x := m.GetMinimumD(); !(x >= -100 && x <= 100) {
			return false
		}
	}
	if m.HasMaximumD() {
		if x := m.GetMaximumD(); !(x >= -100 && x <= 100) {
			return false
		}
	}
	if m.HasStepD() {
		if x := m.GetStepD(); !(x >= 0.01 && x <= 10) {
			return false
		}
	}
	return true
}

func fineAxisRange(m *pb.AxisRange) bool {
	if m.HasMinimumDeg() {
		if x := m.GetMinimumDeg(); !(x >= 0 && x <= 180) {
			return false
		}
	}
	if m.HasMaximumDeg() {
		if x := m.GetMaximumDeg(); !(x >= 0 && x <= 180) {
			return false
		}
	}
	if m.HasStepDeg() {
		if x := m.GetStepDeg(); !(x >= 1 && x <= 180) {
			return false
		}
	}
	return true
}

func fineCheckOrderRequest(m *pb.CheckOrderRequest) bool {
	if m.HasLens() {
		if x := m.GetLens(); !fineLens(x) {
			return false
		}
	}
	if m.HasSeriesName() {
		if x := m.GetSeriesName(); utf8.RuneCountInString(x) > longest {
			return false
		}
	}
	if m.HasSeries() {
		if x := m.GetSeries(); !fineSeries(x) {
			return false
		}
	}
	if m.HasEye() {
		if x := m.GetEye(); !fineEye(x) {
			return false
		}
	}
	return true
}

func fineDrawFitRequest(m *pb.DrawFitRequest) bool {
	if m.HasFit() {
		if x := m.GetFit(); !fineFitRequest(x) {
			return false
		}
	}
	if m.HasCanvas() {
		if x := m.GetCanvas(); !fineCanvas(x) {
			return false
		}
	}
	return true
}

func fineCanvas(m *pb.Canvas) bool {
	if m.HasFormat() {
		if x := m.GetFormat(); !(x >= 0 && x <= 2) {
			return false
		}
	}
	if m.HasWidthPx() {
		if x := m.GetWidthPx(); !(x >= 100 && x <= 4000) {
			return false
		}
	}
	if m.HasHeightPx() {
		if x := m.GetHeightPx(); !(x >= 100 && x <= 4000) {
			return false
		}
	}
	return true
}

func fineDrawLensRequest(m *pb.DrawLensRequest) bool {
	if m.HasDesign() {
		if x := m.GetDesign(); !fineDesignLensRequest(x) {
			return false
		}
	}
	if m.HasCanvas() {
		if x := m.GetCanvas(); !fineCanvas(x) {
			return false
		}
	}
	return true
}
