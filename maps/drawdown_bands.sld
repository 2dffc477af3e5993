<?xml version="1.0" encoding="UTF-8"?>
<StyledLayerDescriptor xmlns="http://www.opengis.net/sld" xmlns:ogc="http://www.opengis.net/ogc" xmlns:xlink="http://www.w3.org/1999/xlink" xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance" version="1.0.0" xsi:schemaLocation="http://www.opengis.net/sld http://schemas.opengis.net/sld/1.0.0/StyledLayerDescriptor.xsd">
  <NamedLayer>
    <Name>drawdown_bands</Name>
    <UserStyle>
      <Name>drawdown_bands</Name>
      <Title>Drawdown</Title>
      <Abstract>Bands between two drawdowns, from light to dark; crosses where injection lifts the head.</Abstract>
      <FeatureTypeStyle>
        <!-- each band: the program repeats what follows, from the lowest band to the highest -->
        <Rule>
          <Name>LABEL</Name>
          <Title>LABEL UNIT</Title>
          <ogc:Filter>
            <ogc:And>
              <ogc:PropertyIsGreaterThanOrEqualTo>
                <ogc:PropertyName>from_m</ogc:PropertyName>
                <ogc:Literal>FROM</ogc:Literal>
              </ogc:PropertyIsGreaterThanOrEqualTo>
              <ogc:PropertyIsLessThan>
                <ogc:PropertyName>from_m</ogc:PropertyName>
                <ogc:Literal>TO</ogc:Literal>
              </ogc:PropertyIsLessThan>
            </ogc:And>
          </ogc:Filter>
          <PolygonSymbolizer>
            <Fill>
              <CssParameter name="fill">COLOUR</CssParameter>
              <CssParameter name="fill-opacity">0.75</CssParameter>
            </Fill>
          </PolygonSymbolizer>
        </Rule>
        <!-- end -->
        <!-- each rise: the same for bands of risen head -->
        <Rule>
          <Name>LABEL</Name>
          <Title>LABEL UNIT</Title>
          <ogc:Filter>
            <ogc:And>
              <ogc:PropertyIsGreaterThanOrEqualTo>
                <ogc:PropertyName>from_m</ogc:PropertyName>
                <ogc:Literal>FROM</ogc:Literal>
              </ogc:PropertyIsGreaterThanOrEqualTo>
              <ogc:PropertyIsLessThan>
                <ogc:PropertyName>from_m</ogc:PropertyName>
                <ogc:Literal>TO</ogc:Literal>
              </ogc:PropertyIsLessThan>
            </ogc:And>
          </ogc:Filter>
          <PolygonSymbolizer>
            <Fill>
              <CssParameter name="fill">COLOUR</CssParameter>
              <CssParameter name="fill-opacity">0.75</CssParameter>
            </Fill>
          </PolygonSymbolizer>
          <PolygonSymbolizer>
            <Fill>
              <GraphicFill>
                <Graphic>
                  <Mark>
                    <WellKnownName>cross</WellKnownName>
                    <Fill>
                      <CssParameter name="fill">#24302f</CssParameter>
                    </Fill>
                    <Stroke>
                      <CssParameter name="stroke">#24302f</CssParameter>
                      <CssParameter name="stroke-width">0.5</CssParameter>
                    </Stroke>
                  </Mark>
                  <Opacity>0.45</Opacity>
                  <Size>9</Size>
                </Graphic>
              </GraphicFill>
            </Fill>
          </PolygonSymbolizer>
        </Rule>
        <!-- end -->
        <Rule>
          <Name>limit</Name>
          <Title>Limit of a band</Title>
          <PolygonSymbolizer>
            <Stroke>
              <CssParameter name="stroke">#1f5673</CssParameter>
              <CssParameter name="stroke-width">0.3</CssParameter>
              <CssParameter name="stroke-opacity">0.6</CssParameter>
            </Stroke>
          </PolygonSymbolizer>
        </Rule>
      </FeatureTypeStyle>
    </UserStyle>
  </NamedLayer>
</StyledLayerDescriptor>
